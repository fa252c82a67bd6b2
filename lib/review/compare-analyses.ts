/** What a newer analysis changes against an older one, band by band. */
import { chooseLimit, findUsableTopHz } from "../result/choose-limit";
import type { Band, Limit, Result } from "../result/result-schema";
import type { Criterion } from "../series/series-schema";
import { listComputedCauses } from "./computed-cause";
import type { Decision } from "./review-schema";

export interface BandChange {
  nominal_Hz: number;
  cause: { before: string; after: string };
  onset: { before: Band["onset"]; after: Band["onset"] };
  limit: { before: Limit | null; after: Limit | null };
  changed: boolean;
  decision: Decision | null;
  keeps_decision: boolean;
}

type Compared = Pick<Result, "bands" | "grid_Hz" | "runs">;

/**
 * @param criterion the limits that are held against each other.
 * @param decisions in force on the older analysis.
 * @returns bands that both analyses have, in the order of the newer one.
 */
export function compareResults(
  before: Compared,
  after: Compared,
  criterion: Criterion,
  decisions: readonly Decision[],
): BandChange[] {
  const topBefore = findUsableTopHz(before);
  const topAfter = findUsableTopHz(after);
  return after.bands.flatMap((band) => {
    const old = before.bands.find((one) => one.nominal_Hz === band.nominal_Hz);
    if (old === undefined) return [];
    const limit = {
      before: chooseLimit(old, criterion, { usableTopHz: topBefore }),
      after: chooseLimit(band, criterion, { usableTopHz: topAfter }),
    };
    const decision = decisions.find((one) => one.nominal_Hz === band.nominal_Hz) ?? null;
    return [
      {
        nominal_Hz: band.nominal_Hz,
        cause: { before: old.cause, after: band.cause },
        onset: { before: old.onset, after: band.onset },
        limit,
        changed:
          old.cause !== band.cause ||
          sayEstimate(old.onset) !== sayEstimate(band.onset) ||
          sayEstimate(limit.before) !== sayEstimate(limit.after),
        decision,
        keeps_decision: decision !== null && fits(decision, old, band, limit),
      },
    ];
  });
}

/** Two estimates are the same where they would be printed the same, to a tenth of a decibel. */
const sayEstimate = (estimate: {
  status: string;
  nominal_dB: number | null;
  spl_dB: number | null;
}): string =>
  [estimate.status, estimate.nominal_dB?.toFixed(1), estimate.spl_dB?.toFixed(1)].join(" ");

/**
 * A decision still fits where it rests on the same evidence: the same computed cause, the same kind
 * of onset and limit, and an onset that moved no further than it was uncertain before.
 */
function fits(
  decision: Decision,
  before: Band,
  after: Band,
  limit: { before: Limit; after: Limit },
): boolean {
  if (decision.cause === null) return false;
  if (!listComputedCauses(after).includes(decision.computed_cause)) return false;
  if (before.onset.status !== after.onset.status) return false;
  if (limit.before.status !== limit.after.status) return false;
  if (before.onset.status !== "found") return true;
  const { low_dB, high_dB, nominal_dB } = before.onset;
  const now = after.onset.nominal_dB;
  if (nominal_dB === null || now === null) return false;
  return now >= (low_dB ?? nominal_dB) && now <= (high_dB ?? nominal_dB);
}
