/** What the analysis says of a band, in the words of a decision. */
import type { Band } from "../result/result-schema";
import type { DecisionCause } from "./review-schema";

/** THD sets a limit of the band under some criterion, though no loss was found. */
const hasDistortionLimit = (band: Pick<Band, "limits">): boolean =>
  band.limits.some(
    (limit) =>
      limit.bound_by === "thd" && (limit.status === "found" || limit.status === "below lowest"),
  );

/**
 * Causes that a decision confirms without a reason. Two where distortion alone sets a limit under
 * one criterion and nothing does under another: which of them is shown depends on the criterion.
 */
export function listComputedCauses(band: Pick<Band, "cause" | "limits">): DecisionCause[] {
  return band.cause === "none" && hasDistortionLimit(band)
    ? ["distortion only", "none"]
    : [band.cause];
}

/** The computed cause that a decision is held against. */
export function computedCauseFor(
  band: Pick<Band, "cause" | "limits">,
  decided: DecisionCause | null,
): DecisionCause {
  const computed = listComputedCauses(band);
  return computed.find((cause) => cause === decided) ?? computed[0] ?? band.cause;
}

/**
 * A band without a finding: no onset up to the loudest run, no limit reached under any criterion,
 * no cause, nothing lost with time. Such bands are confirmed together.
 */
export const isWithoutFinding = (
  band: Pick<Band, "cause" | "limits" | "onset" | "long_term">,
): boolean =>
  band.cause === "none" &&
  band.onset.status === "not reached" &&
  !hasDistortionLimit(band) &&
  band.limits.every((limit) => limit.status === "not reached" || limit.status === "not assessed") &&
  band.long_term.every((run) => run.cause === "none");
