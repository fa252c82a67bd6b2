/**
 * The limit of a band under the criterion that a person picked, from those that the analysis holds.
 * A pair that was not computed as such is put together from its halves: the lowest drive wins
 * (docs/domain.md section 7).
 */
import type { Criterion } from "../series/series-schema";
import type { Band, Limit, Result } from "./result-schema";

export type LimitKind = Limit["kind"];

/** Half a third octave up: upper band edge over the exact mid-band frequency. */
const UPPER_EDGE = 10 ** (1 / 20);

/**
 * The highest frequency at which a harmonic could be seen: twice the last fundamental whose second
 * harmonic exists in any run. Null where the result holds no harmonic at all (reduced tables).
 */
export function findUsableTopHz(result: Pick<Result, "grid_Hz" | "runs">): number | null {
  let top: number | null = null;
  for (const run of result.runs) {
    const second = run.harmonics.find((harmonic) => harmonic.order === 2);
    second?.quality.forEach((quality, at) => {
      const hz = result.grid_Hz[at];
      if (quality !== null && hz !== undefined && 2 * hz > (top ?? 0)) top = 2 * hz;
    });
  }
  return top;
}

/** A distortion criterion cannot apply where the band's second harmonics pass the usable top. */
export const passesUsableTop = (
  band: Pick<Band, "exact_Hz">,
  usableTopHz: number | null,
): boolean => usableTopHz !== null && band.exact_Hz * UPPER_EDGE > usableTopHz / 2;

interface ChooseOptions {
  /** Default short-term. */
  kind?: LimitKind;
  /** From findUsableTopHz: bands above half of it leave THD out of a pair. */
  usableTopHz?: number | null;
}

/**
 * @param criterion one key, or both: whichever comes first.
 * @returns the computed limit where the analysis holds this very criterion, else the combination.
 *   "not assessed" with a reason where a half was never computed.
 */
export function chooseLimit(
  band: Pick<Band, "limits" | "exact_Hz">,
  criterion: Criterion,
  { kind = "short-term", usableTopHz = null }: ChooseOptions = {},
): Limit {
  const computed = findLimit(band, criterion, kind);
  if (computed !== null) return computed;
  if (criterion.thd_percent === undefined || criterion.compression_dB === undefined) {
    return notAssessed(criterion, kind, "this analysis did not compute the criterion");
  }
  const compression = findLimit(band, { compression_dB: criterion.compression_dB }, kind);
  const thd = findLimit(band, { thd_percent: criterion.thd_percent }, kind);
  if (compression === null || thd === null) {
    return notAssessed(criterion, kind, "this analysis did not compute the criterion");
  }
  if (passesUsableTop(band, usableTopHz)) {
    return {
      ...compression,
      criterion,
      reason:
        compression.reason ?? "compression alone: the harmonics lie above what can be measured",
    };
  }
  return { ...firstOf(thd, compression), criterion };
}

function findLimit(
  band: Pick<Band, "limits">,
  criterion: Criterion,
  kind: LimitKind,
): Limit | null {
  return (
    band.limits.find(
      (limit) =>
        limit.kind === kind &&
        limit.criterion.thd_percent === criterion.thd_percent &&
        limit.criterion.compression_dB === criterion.compression_dB,
    ) ?? null
  );
}

const failed = (limit: Limit): boolean =>
  limit.status === "found" || limit.status === "below lowest";

/** Whichever half comes first; "not assessed" while either half is, unless the other has failed. */
function firstOf(thd: Limit, compression: Limit): Limit {
  const halves = [thd, compression];
  const low = halves.find((half) => half.status === "below lowest");
  if (low !== undefined) return low;
  const [first, second] = halves.filter(failed);
  if (first !== undefined && second !== undefined) {
    // An exact tie is the compression's: its estimate is the finer one.
    return (thd.nominal_dB ?? Infinity) < (compression.nominal_dB ?? Infinity) ? thd : compression;
  }
  return first ?? halves.find((half) => half.status === "not assessed") ?? compression;
}

const notAssessed = (criterion: Criterion, kind: LimitKind, reason: string): Limit => ({
  criterion,
  kind,
  status: "not assessed",
  nominal_dB: null,
  low_dB: null,
  high_dB: null,
  spl_dB: null,
  bound_by: null,
  reached: null,
  reason,
});
