/** Output limit of one band under a THD criterion (docs/domain.md section 7). */
import { getAt } from "./get-at";
import { harmonicsOf, type LevelGroup } from "./compression";
import { sayDb, sayHz, sayNumber, sayRun } from "./say";
import type { ThirdOctave } from "./types";
import type { PartLimit } from "./limit-part";

export type ThdVerdict = "met" | "failed" | "unknown";

/**
 * Whether one run meets a THD criterion in band `b`: met if even the unresolved components at twice their
 * floor stay under it, failed if the measured ones alone exceed it.
 */
export function judgeThd(group: LevelGroup, b: number, thdPercent: number): ThdVerdict {
  const stated = statedThdOf(group, b);
  if (stated !== null && Number.isFinite(group.gainDb[b]))
    return stated > (thdPercent / 100) ** 2 ? "failed" : "met";
  const present = harmonicsOf(group, b).filter(({ quality }) => quality !== null);
  if (present.length === 0 || !Number.isFinite(group.gainDb[b])) return "unknown";
  let measured = 0;
  let most = 0;
  for (const { quality, ratio, floorRatio } of present) {
    if (quality === "measured") measured += ratio;
    most += quality === "noise" ? 4 * floorRatio : ratio;
  }
  const limit = (thdPercent / 100) ** 2;
  if (measured > limit) return "failed";
  return most < limit ? "met" : "unknown";
}

/** THD that tables state, as a power ratio; null where a run of the group is a recording or states none. */
function statedThdOf({ runs }: LevelGroup, b: number): number | null {
  const stated = runs.flatMap((run) => run.bands[b]?.statedThd ?? []);
  if (stated.length === 0 || stated.length < runs.length) return null;
  return stated.reduce((sum, ratio) => sum + ratio, 0) / stated.length;
}

/** THD of a group in band `b`, ratio of amplitudes, and whether every component that counts is measured. */
function thdOf(group: LevelGroup, b: number): { ratio: number; measured: boolean; sigma: number } {
  const stated = statedThdOf(group, b);
  if (stated !== null) return { ratio: Math.sqrt(stated), measured: true, sigma: LEAST_THD_SIGMA };
  const present = harmonicsOf(group, b).filter(
    ({ quality }) => quality === "measured" || quality === "uncertain",
  );
  const power = present.reduce((sum, { ratio }) => sum + ratio, 0);
  const sure = present.reduce(
    (sum, { quality, ratio }) => sum + (quality === "measured" ? ratio : 0),
    0,
  );
  const floor = present.reduce((sum, { floorRatio }) => sum + floorRatio, 0);
  return {
    ratio: Math.sqrt(power),
    // What is uncertain may ride along as long as it cannot move the sum by more than a tenth.
    measured: power > 0 && sure >= 0.8 * power,
    sigma: Math.max(LEAST_THD_SIGMA, Math.sqrt(floor / Math.max(power, 1e-30)) / Math.SQRT2),
  };
}

/** 0.15 dB, as a share: no THD is known better. */
const LEAST_THD_SIGMA = 0.0175;

/** Harmonics do not fit in bands whose upper edge passes half the highest usable frequency. */
export function isThdOutOfReach(band: ThirdOctave, topHz: number): boolean {
  return band.highHz > topHz / 2;
}

/**
 * @param groups levels of one kind, ascending.
 * @param uncompressed [levels] whether the band follows its drive at that level; interpolation needs it.
 */
export function findThdLimit(
  groups: readonly LevelGroup[],
  b: number,
  band: ThirdOctave,
  topHz: number,
  thdPercent: number,
  uncompressed: readonly boolean[],
): PartLimit {
  if (isThdOutOfReach(band, topHz)) {
    return {
      status: "not assessed",
      reason: `harmonics of ${sayHz(band.nominalHz)} lie above the measured ${sayHz(Math.round(topHz))}`,
    };
  }
  const verdicts = groups.map((group) => judgeThd(group, b, thdPercent));
  const failing = verdicts.indexOf("failed");
  // A run that passes clears the quieter ones that noise alone left open.
  const passing = verdicts.slice(0, failing < 0 ? undefined : failing).lastIndexOf("met");
  const named = `${sayNumber(thdPercent, 1)} % THD`;
  if (failing === 0) return { status: "below lowest" };
  if (failing > 0 && passing < 0) {
    return {
      status: "not assessed",
      reason: `the ${sayRun(groups[failing]?.levelDb ?? 0)} run exceeds ${named}, and noise leaves the quieter ones open`,
    };
  }
  if (failing < 0) {
    if (passing === groups.length - 1 && passing >= 0) return { status: "not reached" };
    const open = groups[passing + 1];
    return {
      status: "not assessed",
      reason: `noise leaves open whether the ${sayRun(open?.levelDb ?? 0)} run meets ${named}`,
    };
  }
  const low = getAt(groups, passing);
  const high = getAt(groups, failing);
  const bracket: PartLimit = {
    status: "found",
    nominalDb: low.driveDb,
    lowDb: low.driveDb,
    highDb: high.driveDb,
    reason: `between the ${sayRun(low.levelDb)} run, which meets ${named}, and the ${sayRun(high.levelDb)} run`,
  };
  if (failing !== passing + 1 || uncompressed[passing] !== true || uncompressed[failing] !== true)
    return bracket;
  const from = thdOf(low, b);
  const to = thdOf(high, b);
  if (!from.measured || !to.measured || !(to.ratio > from.ratio)) return bracket;
  const growth = Math.log(to.ratio / from.ratio);
  const at = (ratio: number): number => {
    const share = Math.log(ratio / from.ratio) / growth;
    return low.driveDb + Math.min(Math.max(share, 0), 1) * (high.driveDb - low.driveDb);
  };
  const limit = thdPercent / 100;
  const spread = 2 * Math.hypot(from.sigma, to.sigma);
  return {
    status: "found",
    nominalDb: at(limit),
    lowDb: at(limit * (1 - Math.min(spread, 0.9))),
    highDb: at(limit * (1 + spread)),
    reason: `interpolated between ${sayDb(low.driveDb, 0)} and ${sayDb(high.driveDb, 0)}`,
  };
}
