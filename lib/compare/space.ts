/** Kinds of space: only levels of the same kind stand side by side. */
import type { Environment } from "../series/vocabulary";

type SpaceKind = "free field" | "ground plane" | "half space" | "room" | "near field";

const SPACES: Record<Environment, SpaceKind> = {
  anechoic: "free field",
  gated: "free field",
  outdoors: "free field",
  "ground-plane": "ground plane",
  "flush-half-space": "half space",
  "in-room": "room",
  "near-field": "near field",
};

export const toSpaceKind = (environment: Environment): SpaceKind => SPACES[environment];

/** After "measured": "in an anechoic room". */
export const PLACE_WORDS: Record<Environment, string> = {
  anechoic: "in an anechoic room",
  "ground-plane": "on the ground plane",
  "flush-half-space": "flush in a large wall",
  outdoors: "outdoors",
  gated: "in a room, reflections gated out",
  "in-room": "in a room",
  "near-field": "close to the drive unit",
};
