/** Whether somebody may sign off, and the sentence that says why not. */
import { listCriterionParts } from "../result/criteria";
import type { Criterion } from "../series/series-schema";

export interface SignOffFacts {
  /** The caller holds the right to decide. */
  mayDecide: boolean;
  archived: boolean;
  /** Version that is signed off; null where none is. */
  signedVersion: number | null;
  version: number;
  analysisDone: boolean;
  /** Version of the analysis that counts now; null while none is done. */
  currentVersion: number | null;
  /** A newer analysis waits or runs. */
  underWay: boolean;
  bandsTotal: number;
  bandsDecided: number;
  twoPersonRule: boolean;
  /** The caller uploaded, by hand or by token, a run of this very version. */
  uploadedByCaller: number;
}

export interface SignOffRefusal {
  code: "auth.forbidden" | "conflict.state";
  words: string;
}

/** @returns null where nothing stands in the way. The first of several reasons, most lasting first. */
export function findSignOffRefusal(facts: SignOffFacts): SignOffRefusal | null {
  const state = (words: string): SignOffRefusal => ({ code: "conflict.state", words });
  if (!facts.mayDecide) return { code: "auth.forbidden", words: "An analyst signs off." };
  if (facts.archived) return state("This series is archived. Restore it first.");
  if (facts.signedVersion !== null) {
    return state(
      `Version ${facts.signedVersion} is signed off already. Reopen the series to sign again.`,
    );
  }
  if (!facts.analysisDone) return state("This analysis has no result that could be signed.");
  if (facts.underWay) return state("A newer analysis is under way. Wait for its end.");
  if (facts.currentVersion !== facts.version) {
    return state(
      `Version ${facts.version} was replaced by version ${facts.currentVersion ?? "?"}. Decide and sign that one.`,
    );
  }
  const open = facts.bandsTotal - facts.bandsDecided;
  if (open > 0 || facts.bandsTotal === 0) {
    return state(
      `${open} of ${facts.bandsTotal} bands ${open === 1 ? "has" : "have"} no decision yet.`,
    );
  }
  if (facts.twoPersonRule && facts.uploadedByCaller > 0) {
    const runs = facts.uploadedByCaller === 1 ? "a run" : `${facts.uploadedByCaller} runs`;
    return {
      code: "auth.forbidden",
      words: `You uploaded ${runs} of this version, so under the two-person rule somebody else signs off.`,
    };
  }
  return null;
}

/** A criterion can be signed where the analysis judged by it, or by both of its halves. */
export function isJudged(criterion: Criterion, criteria: readonly Criterion[]): boolean {
  const parts = listCriterionParts(criteria);
  const { thd_percent: thd, compression_dB: compression } = criterion;
  return (
    (thd === undefined || parts.thdPercents.includes(thd)) &&
    (compression === undefined || parts.compressionDbs.includes(compression))
  );
}
