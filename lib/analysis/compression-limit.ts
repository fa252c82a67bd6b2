/** Output limit of one band under a compression criterion, from the same fit as its onset (docs/domain.md section 7). */
import type { LevelGroup } from "./compression";
import type { PartLimit } from "./limit-part";
import type { BandOnset } from "./onset/find-onsets";
import { sayDb, sayRun } from "./say";

/**
 * Where a band first loses `lossDb`.
 *
 * @param groups plain short-term levels, ascending.
 */
export function findCompressionLimit(
  groups: readonly LevelGroup[],
  onset: BandOnset,
  lossDb: number,
): PartLimit {
  const { detection, posterior } = onset;
  if (!detection) return { status: "not assessed", reason: onset.reason };
  const losses = [...detection.lossDb];
  const valid = losses.flatMap((loss, k) => (Number.isFinite(loss) ? [k] : []));
  const failing = valid.find((k) => (losses[k] ?? 0) >= lossDb);
  const below = onset.status === "below lowest";
  if (failing === undefined && !below) {
    if (onset.status === "unresolved") return { status: "not assessed", reason: onset.reason };
    return { status: "not reached" };
  }
  const lowest = groups[valid[0] ?? 0];
  if (
    posterior &&
    below &&
    posterior.quantiles(lossDb, Infinity).medianDb < (lowest?.driveDb ?? 0)
  ) {
    return { status: "below lowest" };
  }
  // Losses are counted from a run that is itself compressed: the top may be past the criterion without showing it.
  if (failing === undefined)
    return {
      status: "not reached",
      reason: `less than ${sayDb(lossDb)} lost beyond the ${sayRun(lowest?.levelDb ?? 0)} run, which is compressed itself`,
    };
  const passing = valid[valid.indexOf(failing) - 1];
  const from = groups[passing ?? failing]?.driveDb ?? Number.NaN;
  const to = groups[failing]?.driveDb ?? Number.NaN;
  if (onset.status === "unresolved" || !posterior) {
    if (onset.noLaw === null || passing === undefined)
      return { status: "not assessed", reason: onset.reason };
    return {
      status: "found",
      nominalDb: from,
      lowDb: from,
      highDb: to,
      reason: `bracket only: ${onset.reason}`,
    };
  }
  const top = groups[detection.top]?.driveDb ?? to;
  const { lowDb, medianDb, highDb } = posterior.quantiles(lossDb, top);
  // The runs themselves say on which side of each the criterion is met.
  const nominalDb = Math.min(Math.max(medianDb, from), to);
  return {
    status: "found",
    nominalDb,
    lowDb: Math.min(lowDb, nominalDb),
    highDb: Math.max(highDb, nominalDb),
  };
}
