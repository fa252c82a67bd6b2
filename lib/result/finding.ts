/**
 * What an analysis found in one band, in sentences: the words of the workspace, pure.
 * Strong segments carry the number that the sentence is about.
 */
import {
  formatDb,
  formatFrequency,
  formatLevel,
  formatNumber,
  formatPercent,
  formatSignedDb,
} from "../charts/format";
import type { Band, BandLevel, Limit } from "./result-schema";

export interface Segment {
  text: string;
  strong?: boolean;
}

/** Plain short-term levels of a band, quietest first; variants and repeats' doubles left out. */
export function plainShortTermLevels(band: Band): BandLevel[] {
  const byLevel = new Map<number, BandLevel>();
  for (const level of band.levels) {
    if (level.kind !== "short-term" || level.variant !== undefined) continue;
    if (!byLevel.has(level.level_dB)) byLevel.set(level.level_dB, level);
  }
  return [...byLevel.values()].sort((a, b) => a.level_dB - b.level_dB);
}

/** The main sentence on a band: where its output begins to fall behind, how surely, and what followed. */
export function toFindingSentence(band: Band): Segment[] {
  const levels = plainShortTermLevels(band);
  const lowest = levels[0];
  const top = levels.findLast((level) => level.compression_dB !== null) ?? levels.at(-1);
  const { onset } = band;
  switch (onset.status) {
    case "found":
      return [...toOnsetWords(band), ...toTopStepWords(band, top)];
    case "not reached":
      return [
        { text: "Output follows the input up to the " },
        { text: `${formatLevel(top?.level_dB ?? 0)} run`, strong: true },
        { text: `: the onset was not reached.${toSmallLossWords(top)}` },
      ];
    case "below lowest":
      return [
        { text: "Already past it at the " },
        { text: `${formatLevel(lowest?.level_dB ?? 0)} run`, strong: true },
        { text: ": even the lowest run is compressed, so the losses here are lower bounds." },
      ];
    case "unresolved":
      return [
        ...(onset.control === "slow control"
          ? [{ text: "Slow control", strong: true }]
          : [{ text: "The onset is " }, { text: "unresolved", strong: true }]),
        { text: `: ${onset.reason ?? "the runs do not show it"}.` },
      ];
  }
}

/** At the band's own level where SPL holds, with the run level beside it; else at the run level alone. */
function toOnsetWords(band: Band): Segment[] {
  const { nominal_dB, low_dB, high_dB, spl_dB } = band.onset;
  if (nominal_dB === null) return [];
  const shiftDb = spl_dB === null ? 0 : spl_dB - nominal_dB;
  const interval =
    low_dB === null || high_dB === null
      ? ""
      : ` (90 % interval ${formatNumber(low_dB + shiftDb)} to ${formatNumber(high_dB + shiftDb)})`;
  const run = spl_dB === null ? "" : `, at run level ${formatDb(nominal_dB)}`;
  return [
    { text: `Output begins to fall behind at ${spl_dB === null ? "run level " : ""}` },
    { text: formatDb(nominal_dB + shiftDb), strong: true },
    { text: `${interval}${run}.` },
  ];
}

/** "To the 102 dB run, 9.1 dB more drive gave 1.7 dB more sound." */
function toTopStepWords(band: Band, top: BandLevel | undefined): Segment[] {
  const onset = band.onset;
  if (top?.spl_dB == null || onset.nominal_dB === null || onset.spl_dB === null) return [];
  const drive = top.level_dB - onset.nominal_dB;
  if (drive < 0.5) return [];
  const more = top.spl_dB - onset.spl_dB;
  const sound = more >= 0 ? `${formatDb(more)} more sound` : `${formatDb(-more)} less sound`;
  return [
    {
      text: ` To the ${formatLevel(top.level_dB)} run, ${formatDb(drive)} more drive gave ${sound}.`,
    },
  ];
}

function toSmallLossWords(top: BandLevel | undefined): string {
  const loss = top?.compression_dB;
  const uncertainty = top?.uncertainty_dB;
  if (loss == null || uncertainty == null || Math.abs(loss) <= uncertainty) return "";
  return ` The loss there is ${formatSignedDb(loss, 2)}, under the 1/3 dB that counts as onset.`;
}

/** Whether the cause stands on distortion alone: THD sets the chosen limit and no loss was found. */
export function isDistortionOnly(band: Band, limit: Limit | null): boolean {
  return band.cause === "none" && limit?.status === "found" && limit.bound_by === "thd";
}

/** The figures behind the verdict, each as one line: slope, the two questions, the law. */
export function toEvidenceLines(band: Band): { name: string; value: string; means: string }[] {
  const { slope, odd_ratio, growth_dB, growth_needed_dB, law } = band.evidence;
  const lines: { name: string; value: string; means: string }[] = [];
  if (slope !== null) {
    lines.push({
      name: "slope over the top step",
      value: formatNumber(slope, 2),
      means: toSlopeMeaning(slope),
    });
  }
  if (odd_ratio !== null) {
    lines.push({
      name: "odd harmonics over what the loss needs",
      value: formatNumber(odd_ratio, 2),
      means: odd_ratio < 0.2 ? "too few for an overload (0.20)" : "enough for an overload (0.20)",
    });
  }
  if (growth_dB !== null) {
    const needed = growth_needed_dB === null ? "" : ` (${formatDb(growth_needed_dB)} needed)`;
    const passes = growth_needed_dB !== null && growth_dB > growth_needed_dB;
    lines.push({
      name: "third harmonic beyond what follows the output",
      value: formatSignedDb(growth_dB),
      means: passes ? `grows like an overload${needed}` : `follows the output${needed}`,
    });
  }
  if (law !== null) lines.push({ name: "law that fits best", value: law, means: "" });
  return lines;
}

function toSlopeMeaning(slope: number): string {
  if (slope <= 0.3) return "a ceiling";
  return slope <= 0.8 ? "gradual" : "nearly follows the input";
}

/** "A run at 92 dB would narrow this interval from 2.5 to about 0.9 dB." */
export function toNextRunSentence(band: Band): string | null {
  const next = band.evidence.next_run;
  if (next === null) return null;
  return (
    `A run at ${formatLevel(next.level_dB)} would narrow this interval from ` +
    `${formatNumber(next.width_now_dB)} to about ${formatDb(next.width_expected_dB)}.`
  );
}

/** "After a run at 90 dB it would be about 1.2 dB wide." null where that level was not weighed. */
export function toWidthSentence(band: Band, levelDb: number): string | null {
  const next = band.evidence.next_run;
  const weighed = next?.candidates?.find(({ level_dB }) => level_dB === levelDb);
  if (next === null || weighed === undefined) return null;
  return `After a run at ${formatLevel(levelDb)} the interval would be about ${formatDb(weighed.width_expected_dB)} wide; it is ${formatNumber(next.width_now_dB)} now.`;
}

/** Limit of the chosen criterion in words, as the readout and the column's name say it. */
export function toLimitWords(
  limit: Limit | null,
  topLevelDb: number,
  lowestLevelDb: number,
): string {
  if (limit === null) return "no limit for this criterion";
  const at = limit.spl_dB === null ? formatLevel(limit.nominal_dB ?? 0) : formatDb(limit.spl_dB);
  switch (limit.status) {
    case "found":
      return `limit ${at}, set by ${limit.bound_by === "thd" ? "THD" : "compression"}`;
    case "not reached":
      return `at least ${at}; not reached up to the ${formatLevel(topLevelDb)} run`;
    case "below lowest":
      return `below the ${formatLevel(lowestLevelDb)} run`;
    case "not assessed":
      return `not assessed${limit.reason === undefined ? "" : `: ${limit.reason}`}`;
  }
}

/** Both long-term figures of a band: the whole loss and the part that heat or slow protection took. */
export function toLongTermSentences(band: Band): string[] {
  return band.long_term.map((entry) => {
    const run = `${formatLevel(entry.level_dB)} long-term run`;
    if (entry.total_dB === null) return `${run}: not measured in this band.`;
    const bound = entry.lower_bound ? "at least " : "";
    const thermal =
      entry.thermal_dB === null
        ? "the thermal part is not known without a short-term run at this level"
        : `${bound}${formatSignedDb(entry.thermal_dB, 2)} of it came with time`;
    const uncertainty =
      entry.uncertainty_dB === null ? "" : ` (± ${formatDb(entry.uncertainty_dB, 2)})`;
    return `${run}: ${bound}${formatSignedDb(entry.total_dB, 2)} lost, ${thermal}${uncertainty}.`;
  });
}

/** Broadband loss and largest local excess of a run, said separately. */
export function toShapeSentence(shape: {
  level_dB: number;
  kind: string;
  broadband_dB: number | null;
  excess_dB: number | null;
  excess_Hz: number | null;
}): string {
  const run = `${formatLevel(shape.level_dB)} ${shape.kind} run`;
  if (shape.broadband_dB === null) return `${run}: no band could be compared.`;
  const local =
    shape.excess_dB === null || shape.excess_Hz === null
      ? "no band stands out"
      : `most at ${formatFrequency(shape.excess_Hz)}, ${formatSignedDb(shape.excess_dB)} beyond that`;
  return `${run}: ${formatSignedDb(shape.broadband_dB)} on average over the bands, ${local}.`;
}

/** THD of a level in words; an uncertain value never looks certain. */
export function toThdWords(level: BandLevel): string {
  if (level.thd_percent === null || level.thd_quality === null) return "in the noise";
  const value = formatPercent(level.thd_percent);
  const orders = level.thd_orders === "" ? "" : ` (H${level.thd_orders.replace("-", "–H")})`;
  return level.thd_quality === "measured"
    ? `${value}${orders}`
    : `about ${value}${orders}, near the noise`;
}
