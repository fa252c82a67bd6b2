/** Output limits of a band, one per criterion and kind of run (docs/domain.md section 7). */
import type { Criterion } from "../series/series-schema";
import type { LimitStatus } from "../series/vocabulary";
import { lossOf, type LevelGroup } from "./compression";
import { findCompressionLimit } from "./compression-limit";
import type { PartLimit } from "./limit-part";
import type { BandOnset } from "./onset/find-onsets";
import { sayDb, sayRun } from "./say";
import { findThdLimit, isThdOutOfReach, judgeThd } from "./thd-limit";
import type { ThirdOctave } from "./types";

export interface BandLimit {
  criterion: Criterion;
  kind: "short-term" | "long-term";
  status: LimitStatus;
  /** Drives, dB; NaN where not assessed. */
  nominalDb: number;
  lowDb: number;
  highDb: number;
  /** SPL of the band at the nominal drive, dB; NaN where SPL is not valid. */
  splDb: number;
  boundBy: "compression" | "thd" | null;
  reached: boolean | null;
  reason: string | undefined;
}

/** What the limits of a band are computed from. */
export interface LimitInput {
  band: ThirdOctave;
  index: number;
  /** Highest usable frequency of a harmonic, Hz. */
  topHz: number;
  /** Plain short-term levels, ascending; the first is the reference. */
  groups: readonly LevelGroup[];
  onset: BandOnset;
  /** Plain long-term levels, ascending. */
  longTerm: readonly LevelGroup[];
}

/** Short-term limit of a band under one criterion. */
export function findLimit(input: LimitInput, criterion: Criterion): BandLimit {
  const { groups, onset, band, index } = input;
  const { detection } = onset;
  const uncompressed = groups.map(
    (_, k) => detection !== null && k < detection.firstActive && onset.status !== "below lowest",
  );
  const compression =
    criterion.compression_dB === undefined
      ? null
      : findCompressionLimit(groups, onset, criterion.compression_dB);
  const thd =
    criterion.thd_percent === undefined
      ? null
      : findThdLimit(groups, index, band, input.topHz, criterion.thd_percent, uncompressed);
  const part = combine(compression, thd, isThdOutOfReach(band, input.topHz));
  return toLimit(criterion, "short-term", part, groups, (driveDb) => splAt(input, driveDb, part));
}

/**
 * Long-term limit: pass or fail from one level, a bracket from two or more; nothing is interpolated between
 * conditions of heat.
 *
 * @returns null where there are no long-term runs.
 */
export function findLongTermLimit(input: LimitInput, criterion: Criterion): BandLimit | null {
  const { longTerm, groups, index, band, topHz } = input;
  const reference = groups[0];
  if (longTerm.length === 0 || !reference) return null;
  const thdLeftOut = isThdOutOfReach(band, topHz);
  const bracket = (verdicts: ("met" | "failed" | "unknown")[], what: string): PartLimit => {
    const failing = verdicts.indexOf("failed");
    const passing = verdicts.slice(0, failing < 0 ? undefined : failing).lastIndexOf("met");
    if (failing === 0) return { status: "below lowest" };
    if (failing < 0 && passing === longTerm.length - 1) return { status: "not reached" };
    const low = longTerm[passing];
    const high = longTerm[failing];
    if (!low || !high)
      return {
        status: "not assessed",
        reason: `noise leaves open whether ${what} is met after conditioning`,
      };
    return {
      status: "found",
      nominalDb: low.driveDb,
      lowDb: low.driveDb,
      highDb: high.driveDb,
      reason: `between the long-term runs at ${sayRun(low.levelDb)} and ${sayRun(high.levelDb)}`,
    };
  };
  const limitDb = criterion.compression_dB;
  const limitPercent = criterion.thd_percent;
  const compression =
    limitDb === undefined
      ? null
      : bracket(
          longTerm.map((group) => {
            const { lossDb } = lossOf(group, reference, index);
            if (!Number.isFinite(lossDb)) return "unknown";
            return lossDb >= limitDb ? "failed" : "met";
          }),
          `${sayDb(limitDb)} of compression`,
        );
  let thd: PartLimit | null = null;
  if (limitPercent !== undefined) {
    thd = thdLeftOut
      ? { status: "not assessed", reason: "harmonics lie above the measured range" }
      : bracket(
          longTerm.map((group) => judgeThd(group, index, limitPercent)),
          `${limitPercent} % THD`,
        );
  }
  const part = combine(compression, thd, thdLeftOut);
  return toLimit(criterion, "long-term", part, longTerm, (driveDb) => {
    const at = longTerm.find((group) => Math.abs(group.driveDb - driveDb) < 1e-6);
    return at?.splDb[index] ?? Number.NaN;
  });
}

interface CombinedPart extends PartLimit {
  boundBy: "compression" | "thd" | null;
}

/** Whichever half of a pair comes first; one that is out of reach by frequency is left out and said to be. */
function combine(
  compression: PartLimit | null,
  thd: PartLimit | null,
  thdLeftOut: boolean,
): CombinedPart {
  if (!compression) return { ...(thd ?? { status: "not assessed" }), boundBy: bound(thd, "thd") };
  if (!thd) return { ...compression, boundBy: bound(compression, "compression") };
  if (thdLeftOut) {
    return {
      ...compression,
      reason: `THD left out: ${thd.reason ?? ""}`,
      boundBy: bound(compression, "compression"),
    };
  }
  const parts: CombinedPart[] = [
    { ...compression, boundBy: bound(compression, "compression") },
    { ...thd, boundBy: bound(thd, "thd") },
  ];
  const past = parts.find(({ status }) => status === "below lowest");
  if (past) return past;
  const found = parts.filter(({ status }) => status === "found");
  const open = parts.find(({ status }) => status === "not assessed");
  if (found.length === 0) return open ?? { status: "not reached", boundBy: null };
  const first = found.reduce((a, b) =>
    (b.nominalDb ?? Infinity) < (a.nominalDb ?? Infinity) ? b : a,
  );
  return {
    ...first,
    lowDb: Math.min(...found.map(({ lowDb }) => lowDb ?? Infinity)),
    highDb: Math.min(...found.map(({ highDb }) => highDb ?? Infinity)),
    ...(open ? { reason: `the other half is open: ${open.reason ?? ""}` } : {}),
  };
}

const bound = <By>(part: PartLimit | null, by: By): By | null =>
  part?.status === "found" || part?.status === "below lowest" ? by : null;

function toLimit(
  criterion: Criterion,
  kind: BandLimit["kind"],
  part: CombinedPart,
  groups: readonly LevelGroup[],
  splOf: (driveDb: number) => number,
): BandLimit {
  const common = {
    criterion,
    kind,
    status: part.status,
    boundBy: part.boundBy,
    reason: part.reason,
  };
  const at = (driveDb: number, lowDb: number, highDb: number, reached: boolean): BandLimit => ({
    ...common,
    nominalDb: driveDb,
    lowDb,
    highDb,
    splDb: splOf(driveDb),
    reached,
  });
  const { NaN: none } = Number;
  if (part.status === "found") {
    return at(part.nominalDb ?? none, part.lowDb ?? none, part.highDb ?? none, true);
  }
  if (part.status === "not assessed") {
    return { ...common, nominalDb: none, lowDb: none, highDb: none, splDb: none, reached: null };
  }
  const past = part.status === "below lowest";
  const run = (past ? groups[0] : groups.at(-1))?.driveDb ?? none;
  return at(run, run, run, past);
}

/** SPL of a band at a drive: measured at a run's own level, else along the fitted gain and loss. */
function splAt({ groups, onset, index }: LimitInput, driveDb: number, part: CombinedPart): number {
  const own = groups.find((group) => Math.abs(group.driveDb - driveDb) < 1e-6);
  if (own) return own.splDb[index] ?? Number.NaN;
  if (part.boundBy === "compression" && part.nominalDb !== undefined && onset.posterior) {
    return splOnLaw(groups, onset, index, driveDb);
  }
  const above = groups.findIndex((group) => group.driveDb > driveDb);
  const high = groups[above];
  const low = groups[above - 1];
  if (!high || !low) return Number.NaN;
  const share = (driveDb - low.driveDb) / (high.driveDb - low.driveDb);
  const lowSpl = low.splDb[index] ?? Number.NaN;
  return lowSpl + share * ((high.splDb[index] ?? Number.NaN) - lowSpl);
}

/** SPL of a band at a drive on the median law, dB; NaN where SPL is not valid. */
export function splOnLaw(
  groups: readonly LevelGroup[],
  onset: BandOnset,
  index: number,
  driveDb: number,
): number {
  const laws = onset.posterior?.samples ?? [];
  const losses = Float64Array.from(laws, ({ shape, onsetDb }) =>
    shape.lossDb(driveDb - onsetDb),
  ).sort();
  return linearSplGain(groups, onset, index) + driveDb - (losses[losses.length >> 1] ?? 0);
}

/** SPL minus drive of a band as long as it is linear, dB; NaN where SPL is not valid. */
export function linearSplGain(
  groups: readonly LevelGroup[],
  onset: BandOnset,
  index: number,
): number {
  const gainDb = onset.posterior?.gainDb ?? onset.detection?.gainDb ?? Number.NaN;
  const own = groups.find(
    (group) => Number.isFinite(group.splDb[index]) && Number.isFinite(group.gainDb[index]),
  );
  if (!own) return Number.NaN;
  // Gating changes the level of a band by the same decibels in every run.
  const gateDb =
    (own.splDb[index] ?? Number.NaN) - ((own.gainDb[index] ?? Number.NaN) + own.driveDb);
  return gainDb + gateDb;
}
