/** The headline in sentences: computed from the figures, rounded down, never altered by hand. */
import { formatFrequency, formatLevel, formatLimitDown } from "../charts/format";
import type { Result } from "./result-schema";

type Headline = Result["headline"][number];

/**
 * "Reached at least 101 dB at 1 m in every band from 80 Hz to 16 kHz." and, where a band gives out,
 * "At 50 Hz it stops at 93 dB, however far you turn it up." (the second half only for a ceiling).
 */
export function toHeadlineSentences(headline: Headline): string[] {
  const { spl_dB, at_least, from_Hz, to_Hz, first } = headline;
  const reached =
    `Reached ${at_least ? "at least " : ""}${formatLimitDown(spl_dB)} at 1\u00A0m ` +
    `in every band from ${formatFrequency(from_Hz)} to ${formatFrequency(to_Hz)}.`;
  return first === null ? [reached] : [reached, toFirstSentence(first)];
}

function toFirstSentence(first: NonNullable<Headline["first"]>): string {
  const band = formatFrequency(first.nominal_Hz);
  if (first.status === "below lowest") {
    const run = first.nominal_dB === null ? "lowest run" : `${formatLevel(first.nominal_dB)} run`;
    return `At ${band} it was already past its limit at the ${run}.`;
  }
  const at = first.spl_dB === null ? null : formatLimitDown(first.spl_dB);
  const run = first.nominal_dB === null ? "" : ` (run level ${formatLimitDown(first.nominal_dB)})`;
  if (at === null) return `At ${band} it gives out first${run}.`;
  return first.ceiling
    ? `At ${band} it stops at ${at}, however far you turn it up${run}.`
    : `At ${band} it gives out first, at ${at}${run}.`;
}
