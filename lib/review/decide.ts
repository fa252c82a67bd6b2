/** The rules of deciding: what is accepted, what needs a reason, and who was quicker. */
import { formatFrequency } from "../charts/format";
import { AppError } from "../errors/app-error";
import type { Band } from "../result/result-schema";
import { computedCauseFor, listComputedCauses } from "./computed-cause";
import type { DecisionCause } from "./review-schema";

export const SHORTEST_REASON = 3;

/** What somebody wants a band's decision to be. */
export interface WantedDecision {
  nominal_Hz: number;
  /** null opens the band again. */
  cause: DecisionCause | null;
  reason: string | null;
  /** Version that they saw; 0 where there was none. */
  seen_version: number;
}

/** A decision to be written as the next version of its band. */
export interface NewDecision {
  nominalHz: number;
  version: number;
  cause: DecisionCause | null;
  computedCause: DecisionCause;
  reason: string | null;
}

/** Only another cause than a computed one needs words. */
export const needsReason = (
  band: Pick<Band, "cause" | "limits">,
  cause: DecisionCause | null,
): boolean => cause !== null && !listComputedCauses(band).includes(cause);

/**
 * @param inForce [any] the newest version of each band that has one.
 * @returns bands whose decision is another than the caller saw; empty where all may be written.
 */
export function findConflicts<D extends { nominal_Hz: number; version: number }>(
  wanted: readonly WantedDecision[],
  inForce: readonly D[],
): D[] {
  const seen = new Map(wanted.map((one) => [one.nominal_Hz, one.seen_version]));
  return inForce.filter(
    (decision) =>
      seen.has(decision.nominal_Hz) && seen.get(decision.nominal_Hz) !== decision.version,
  );
}

/**
 * All or nothing: the first fault refuses the whole request.
 *
 * @param bands of the analysis.
 * @throws AppError "request.invalid" for a band that is not there, named twice, or "distortion
 *   only" where it was not computed; "run.reason-missing" where a change has no reason
 */
export function toNewDecisions(
  wanted: readonly WantedDecision[],
  bands: readonly Pick<Band, "nominal_Hz" | "cause" | "limits">[],
): NewDecision[] {
  const named = new Set<number>();
  return wanted.map((one, at) => {
    const band = bands.find((other) => other.nominal_Hz === one.nominal_Hz);
    if (band === undefined) {
      throw invalid(at, "nominal_Hz", `The analysis has no band at ${one.nominal_Hz} Hz.`);
    }
    const name = formatFrequency(band.nominal_Hz);
    if (named.has(one.nominal_Hz)) {
      throw invalid(at, "nominal_Hz", `The ${name} band is named twice.`);
    }
    named.add(one.nominal_Hz);
    const computed = computedCauseFor(band, one.cause);
    if (one.cause === "distortion only" && computed !== one.cause) {
      throw invalid(
        at,
        "cause",
        `"Distortion only" can be confirmed where it was computed; at ${name} it was not. Choose one of the eight causes.`,
      );
    }
    const reason = one.reason === null || one.reason === "" ? null : one.reason;
    if (needsReason(band, one.cause) && (reason?.length ?? 0) < SHORTEST_REASON) {
      throw new AppError(
        "run.reason-missing",
        `At ${name} ${computed} was computed. Another cause needs a reason.`,
        {
          details: {
            nominal_Hz: one.nominal_Hz,
            fields: [{ path: `decisions.${at}.reason`, message: "Give a reason." }],
          },
        },
      );
    }
    return {
      nominalHz: one.nominal_Hz,
      version: one.seen_version + 1,
      cause: one.cause,
      computedCause: computed,
      reason,
    };
  });
}

const invalid = (at: number, field: string, message: string): AppError =>
  new AppError("request.invalid", message, {
    details: { fields: [{ path: `decisions.${at}.${field}`, message }] },
  });
