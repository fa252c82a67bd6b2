/** What a plan implies, in words: hints beside the fields and the line in the header. */
import { thirdOctaves } from "@/lib/analysis/bands";
import { formatFrequency, formatPlain, NBSP } from "@/lib/charts/format";
import type { Plan } from "@/lib/series/plan-schema";

/** "About 0.4 s per third octave. Bands from 40 Hz to 16 kHz, 27 in all: …" */
export function toSweepHint(sweep: Plan["sweep"]): string {
  const decades = Math.log10(sweep.stop_Hz / sweep.start_Hz);
  const perThirdS = sweep.length_s / (decades * 10);
  const bands = thirdOctaves(sweep.start_Hz, sweep.stop_Hz);
  const [first] = bands;
  const last = bands.at(-1);
  const pace = `About ${formatPlain(Math.round(perThirdS * 10) / 10)}${NBSP}s per third octave.`;
  if (first === undefined || last === undefined)
    return `${pace} No whole band lies between start and end.`;
  return `${pace} Bands from ${formatFrequency(first.nominalHz)} to ${formatFrequency(last.nominalHz)}, ${bands.length} in all: the octave next to the start is not measured well.`;
}

/** A level counts from three times the largest dimension on. */
export function toDistanceHint(
  distanceM: number,
  largestDimensionM: number | null,
): { words: string; near: boolean } | null {
  if (largestDimensionM === null || !(distanceM > 0)) return null;
  const farM = 3 * largestDimensionM;
  const near = distanceM < farM - 1e-9;
  return {
    near,
    words: `3 × ${formatPlain(largestDimensionM)}${NBSP}m = ${formatPlain(farM)}${NBSP}m: ${near ? "nearer than that, so levels at 1 m carry a warning" : "far enough"}`,
  };
}

/** "Pink noise at 93 dB, peaks at −3 dBFS like the loudest sweep. Never leave it unattended." */
export function toConditioningHint(plan: Pick<Plan, "conditioning" | "levels">): string {
  const { rms_re_sweep_dB: rmsDb } = plan.conditioning;
  const levels = plan.levels.filter((l) => l.long_term).map((l) => l.level_dB + rmsDb);
  const at =
    levels.length === 0
      ? `${formatPlain(Math.abs(rmsDb))}${NBSP}dB ${rmsDb <= 0 ? "under" : "over"} its sweep`
      : `at ${levels.map((db) => formatPlain(db)).join(" and ")}${NBSP}dB`;
  return `Pink noise ${at}. Never leave it unattended.`;
}

/** "6 levels, 1 long-term · 11.05 s sweep, 20 Hz to 20 kHz" */
export function toPlanLine(plan: Plan): string {
  const longTerm = plan.levels.filter((l) => l.long_term).length;
  const levels = `${plan.levels.length} levels${longTerm > 0 ? `, ${longTerm} long-term` : ""}`;
  const { length_s, start_Hz, stop_Hz } = plan.sweep;
  return `${levels} · ${formatPlain(length_s)}${NBSP}s sweep, ${formatFrequency(start_Hz)} to ${formatFrequency(stop_Hz)}`;
}

export const ENVIRONMENT_WORDS = {
  anechoic: "anechoic",
  "ground-plane": "outdoors, ground plane",
  "flush-half-space": "flush in a large wall",
  outdoors: "outdoors, free of the ground",
  gated: "room, gated",
  "in-room": "room, not gated",
  "near-field": "near field",
} as const satisfies Record<Plan["place"]["environment"], string>;

export const TESTER_PLACE_WORDS = {
  "in-room": "in the room",
  "next-room": "next room, door closed",
  "outdoors-10m": "outdoors, 10 m away",
} as const satisfies Record<Plan["place"]["tester"], string>;

export const CALIBRATION_WORDS = {
  "calibrator-before-after": "calibrator before, after",
  calibrator: "calibrator before",
  sensitivity: "known sensitivity",
} as const satisfies Record<Plan["calibration"]["by"], string>;
