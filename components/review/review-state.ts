/** What the screen shows of a review: the server's decisions with those on their way on top. */
import { computedCause, type BandDecision } from "@/lib/charts/band-columns";
import { formatFrequency } from "@/lib/charts/format";
import { chooseLimit, findUsableTopHz } from "@/lib/result/choose-limit";
import type { Band, Result } from "@/lib/result/result-schema";
import type { Person } from "@/lib/api/common";
import { computedCauseFor, isWithoutFinding } from "@/lib/review/computed-cause";
import type { WantedDecision } from "@/lib/review/decide";
import type { Decision, DecisionCause } from "@/lib/review/review-schema";
import { DECISION_CAUSES } from "@/lib/review/review-schema";
import type { Criterion } from "@/lib/series/series-schema";

export interface ShownDecision extends Decision {
  /** Not yet taken by the server. */
  waiting: boolean;
}

/**
 * Two readings of the same bands as one. A reading may have been on its way for longer than an
 * act that it does not know of: versions only grow, so the higher one is the later.
 */
export function toNewest(one: readonly Decision[], other: readonly Decision[]): Decision[] {
  const newest = new Map<number, Decision>();
  for (const decision of [...one, ...other]) {
    const known = newest.get(decision.nominal_Hz);
    if (known === undefined || known.version < decision.version) {
      newest.set(decision.nominal_Hz, decision);
    }
  }
  return [...newest.values()];
}

/** By nominal frequency; what waits counts as taken, in its order. */
export function toShownDecisions(
  inForce: readonly Decision[],
  waiting: readonly { decisions: readonly WantedDecision[]; atMs: number }[],
  bands: readonly Band[],
  me: Person,
): Map<number, ShownDecision> {
  const shown = new Map<number, ShownDecision>(
    inForce.map((decision) => [decision.nominal_Hz, { ...decision, waiting: false }]),
  );
  for (const act of waiting) {
    for (const { nominal_Hz, cause, reason, seen_version } of act.decisions) {
      const band = bands.find((one) => one.nominal_Hz === nominal_Hz);
      if (band === undefined) continue;
      const computed = computedCauseFor(band, cause);
      shown.set(nominal_Hz, {
        nominal_Hz,
        version: seen_version + 1,
        cause,
        computed_cause: computed,
        changed: cause !== null && cause !== computed,
        reason,
        by: me,
        at: new Date(act.atMs).toISOString(),
        waiting: true,
      });
    }
  }
  return shown;
}

/** For the wall: tick, boxed tick or empty square under each column. */
export const toBandDecisions = (
  shown: ReadonlyMap<number, ShownDecision>,
): Map<number, BandDecision> =>
  new Map(
    [...shown].flatMap(([hz, { cause, changed }]): [number, BandDecision][] =>
      cause === null ? [] : [[hz, { state: changed ? "changed" : "confirmed", cause }]],
    ),
  );

/** The cause that the analysis shows for a band under a criterion: what "confirm" would confirm. */
export function toComputedCause(result: Result, band: Band, criterion: Criterion): DecisionCause {
  const limit = chooseLimit(band, criterion, { usableTopHz: findUsableTopHz(result) });
  const name = computedCause(band, limit);
  return DECISION_CAUSES.find((cause) => cause === name) ?? band.cause;
}

/** @param causes [bands] what each is decided as; null opens it again. */
export function toWanted(
  shown: ReadonlyMap<number, ShownDecision>,
  causes: readonly { nominal_Hz: number; cause: DecisionCause | null; reason: string | null }[],
): WantedDecision[] {
  return causes.map((one) => ({
    ...one,
    seen_version: shown.get(one.nominal_Hz)?.version ?? 0,
  }));
}

const isOpen = (shown: ReadonlyMap<number, ShownDecision>, band: Band): boolean =>
  (shown.get(band.nominal_Hz)?.cause ?? null) === null;

export interface ReviewCount {
  total: number;
  decided: number;
  /** Open, and the analysis found nothing there. */
  openWithoutFinding: Band[];
  /** Open, with something to look at; rising frequency. */
  openWithFinding: Band[];
}

export function countReview(
  bands: readonly Band[],
  shown: ReadonlyMap<number, ShownDecision>,
): ReviewCount {
  const open = bands.filter((band) => isOpen(shown, band));
  return {
    total: bands.length,
    decided: bands.length - open.length,
    openWithoutFinding: open.filter(isWithoutFinding),
    openWithFinding: open.filter((band) => !isWithoutFinding(band)),
  };
}

/** The next open band above, with a finding if there is any such, going round at the top. */
export function findNextOpen(
  bands: readonly Band[],
  shown: ReadonlyMap<number, ShownDecision>,
  fromHz: number | null,
): number | null {
  const { openWithFinding, openWithoutFinding } = countReview(bands, shown);
  const open = (openWithFinding.length > 0 ? openWithFinding : openWithoutFinding)
    .map((band) => band.nominal_Hz)
    .filter((hz) => hz !== fromHz);
  return open.find((hz) => fromHz === null || hz > fromHz) ?? open[0] ?? null;
}

/** Bands from one to the other, both included, in the order of the wall. */
export function toRange(bands: readonly Band[], fromHz: number, toHz: number): Band[] {
  const [low, high] = fromHz < toHz ? [fromHz, toHz] : [toHz, fromHz];
  return bands.filter((band) => band.nominal_Hz >= low && band.nominal_Hz <= high);
}

/** "12 have no finding. Next with one: 63 Hz, then 12.5 kHz." */
export function sayOpenBands({ openWithFinding, openWithoutFinding }: ReviewCount): string {
  const n = openWithoutFinding.length;
  const [first, second] = openWithFinding.map((band) => formatFrequency(band.nominal_Hz));
  const without = n === 0 ? "" : `${n} ${n === 1 ? "has" : "have"} no finding.`;
  const next =
    first === undefined
      ? ""
      : `${n === 0 ? "Next" : "Next with one"}: ${first}${second === undefined ? "" : `, then ${second}`}.`;
  return [without, next].filter((part) => part !== "").join(" ");
}
