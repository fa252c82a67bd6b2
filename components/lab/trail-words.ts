/** Events of the lab-wide trail in words. What belongs to a series reads as in its history. */
import { z } from "zod";
import type { TrailEvent } from "@/lib/api/labs";
import type { TrailAbout } from "@/lib/labs/trail-about";
import { ROLES } from "@/lib/roles/roles";
import { toHistoryWords } from "@/lib/series/history-words";

const rolesSchema = z.array(z.enum(ROLES));
const detailsSchema = z.object({
  name: z.string().optional(),
  email: z.string().optional(),
  owner: z.string().optional(),
  roles: rolesSchema.optional(),
  from: rolesSchema.optional(),
  to: rolesSchema.optional(),
  endedSessions: z.number().optional(),
  time_zone: z.string().optional(),
  settings: z.unknown().optional(),
});
type Details = z.infer<typeof detailsSchema>;

export const ABOUT_WORDS: Record<TrailAbout, string> = {
  "sign-ins": "sign-ins",
  people: "people and roles",
  tokens: "tokens",
  lab: "settings",
  series: "series",
};

const listed = (roles: Details["roles"]): string =>
  roles === undefined || roles.length === 0 ? "no role" : roles.join(", ");

const WORDS: Record<string, (details: Details) => string> = {
  "account.signed-in": () => "signed in",
  "account.signed-out": () => "signed out",
  "account.password-changed": (d) => `changed the password${sayEnded(d.endedSessions ?? 0)}`,
  "account.password-reset": (d) =>
    `set a new password by a mailed link${sayEnded(d.endedSessions ?? 0)}`,
  "account.address-changed": (d) => `signs in with ${d.email ?? "another address"} now`,
  "invitation.created": (d) => `invited ${d.email ?? "somebody"} as ${listed(d.roles)}`,
  "invitation.withdrawn": (d) => `withdrew the invitation for ${d.email ?? "somebody"}`,
  "member.joined": (d) => `joined the lab as ${listed(d.roles)}`,
  "member.roles-changed": (d) =>
    `changed the roles of ${d.name ?? "a member"} from ${listed(d.from)} to ${listed(d.to)}`,
  "member.removed": (d) => `removed ${d.name ?? "a member"}, who was ${listed(d.roles)}`,
  "token.created": (d) => `made the token ${d.name ?? ""} for ${listed(d.roles)}`,
  "token.revoked": (d) =>
    `revoked the token ${d.name ?? ""}${d.owner === undefined ? "" : ` of ${d.owner}`}`,
  "lab.created": () => "founded the lab",
  "lab.changed": (d) => `changed ${sayLabChange(d)}`,
  "lab.exported": () => "exported everything that the lab owns",
  "loudspeaker.created": () => "entered a loudspeaker",
  "loudspeaker.changed": () => "changed the particulars of a loudspeaker",
  "loudspeaker.photo-set": () => "gave a loudspeaker a photo",
  "microphone.sent": () => "sent a microphone file",
};

function sayEnded(sessions: number): string {
  if (sessions === 0) return "";
  return sessions === 1 ? "; one other session ended" : `; ${sessions} other sessions ended`;
}

function sayLabChange(details: Details): string {
  const parts = [
    ...(details.name === undefined ? [] : [`the name of the lab to ${details.name}`]),
    ...(details.time_zone === undefined ? [] : [`its time zone to ${details.time_zone}`]),
    ...(details.settings === undefined ? [] : ["its settings"]),
  ];
  return parts.length === 0 ? "nothing in the lab" : parts.join(", ");
}

/** @returns what was done, and the reason where there was one. */
export function toTrailWords({ act, details }: Pick<TrailEvent, "act" | "details">): {
  words: string;
  reason: string | null;
} {
  const say = WORDS[act];
  if (say === undefined) return toHistoryWords(act, details);
  const parsed = detailsSchema.safeParse(details);
  return { words: say(parsed.success ? parsed.data : {}), reason: null };
}
