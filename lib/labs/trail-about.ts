/** What the lab-wide trail can be asked about: an act is named "room.what-happened". */
export const TRAIL_ABOUT = ["sign-ins", "people", "tokens", "lab", "series"] as const;
export type TrailAbout = (typeof TRAIL_ABOUT)[number];

const ROOMS: Record<Exclude<TrailAbout, "series">, readonly string[]> = {
  "sign-ins": ["account"],
  people: ["member", "invitation"],
  tokens: ["token"],
  lab: ["lab"],
};

/** Acts by the word before their dot: only these, or all but these. */
export interface TrailRooms {
  only: boolean;
  rooms: readonly string[];
}

/** "series" is the work of the lab: every act that belongs to none of the others. */
export const toTrailRooms = (about: TrailAbout): TrailRooms =>
  about === "series"
    ? { only: false, rooms: Object.values(ROOMS).flat() }
    : { only: true, rooms: ROOMS[about] };
