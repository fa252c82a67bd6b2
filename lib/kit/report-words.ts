/** Sentences and rows of the one-page report. */
import { CAUSE_WORDS } from "../charts/marks";
import {
  formatFrequency,
  formatLevel,
  formatList,
  formatPlain,
  formatSigned,
  NBSP,
} from "../charts/format";
import { computeAllowedS, WEEK_RULES } from "../exposure/rules";
import { toTimeText } from "../exposure/words";
import type { Snapshot } from "../publication/snapshot-schema";
import {
  toChangedWords,
  toLimitWords,
  toMeasuredWords,
  toSeatSource,
  toSplUncertaintyWords,
} from "../reader/page-words";
import { PARTS_OF_SOUND, toPartsOfSound, toReachedWords } from "../reader/parts-of-sound";
import { toLongDay } from "../time/time-words";

export interface ReportPart {
  name: string;
  range: string;
  reached: string;
  heldBy: string;
  longTerm: string;
}

/** One row per part of the sound. */
export function toReportParts(snapshot: Snapshot): ReportPart[] {
  return toPartsOfSound(snapshot).map((part) => ({
    name: part.name,
    range: part.range,
    reached: toReachedWords(part),
    heldBy:
      part.cause === null || part.causeHz === null
        ? part.reachedDb === null
          ? "not known"
          : "limit not reached"
        : `${CAUSE_WORDS[part.cause]}, ${formatFrequency(part.causeHz)}`,
    longTerm: toLongTermWords(snapshot, part.name),
  }));
}

/** The largest loss after conditioning in a part of the sound. */
function toLongTermWords({ bands }: Snapshot, name: string): string {
  const part = PARTS_OF_SOUND.find((one) => one.name === name);
  const runs = bands
    .filter((band) => part !== undefined && isWithin(band.nominal_Hz, part))
    .flatMap((band) => band.long_term);
  let worst: { totalDb: number; bound: boolean } | null = null;
  for (const { total_dB: totalDb, lower_bound: bound } of runs) {
    if (totalDb !== null && totalDb > (worst?.totalDb ?? -Infinity)) worst = { totalDb, bound };
  }
  if (worst === null) return "not tested";
  return `${worst.bound ? "at least " : ""}${formatSigned(worst.totalDb)}${NBSP}dB`;
}

const isWithin = (hz: number, part: { fromHz: number; toHz: number }): boolean =>
  hz >= part.fromHz && hz <= part.toHz;

/** "Long-term, 102 dB"; without levels where nothing was conditioned. */
export function toLongTermHead({ measured }: Snapshot): string {
  const levels = measured.long_term_levels_dB;
  return levels.length === 0
    ? "Long-term"
    : `Long-term, ${formatList(levels.map((one) => formatPlain(one)))}${NBSP}dB`;
}

/** What the marks of the figure mean. */
export function toCaption({ measured, bands }: Snapshot): string {
  const levels = measured.levels_dB.map((one) => formatPlain(one)).join(", ");
  const highest = formatLevel(Math.max(...measured.levels_dB));
  const lowest = formatLevel(Math.min(...measured.levels_dB));
  const changed = bands.some((band) => band.cause_changed)
    ? "; the coloured one was changed by the analyst"
    : "";
  const bound = bands.some((band) => band.long_term.some((run) => run.lower_bound))
    ? " The bracket marks lower bounds."
    : "";
  return (
    `Each shade ends where that run reached (${levels}${NBSP}dB); shades do not add up. Solid line: limit. ` +
    `Open line: not reached up to the ${highest} run. Notch: onset. Hatching: compression. ` +
    `Causes: short-term, the long-term one beside it${changed}. ` +
    `Below: compression in dB re the ${lowest} run, grey where under its uncertainty.${bound}`
  );
}

/** What the notice means for music: an estimate, and the time at exactly that level. */
export function toMusicWords(snapshot: Snapshot): string {
  const always =
    "It must also cover work, traffic, headphones and concerts. An estimate, not medical advice.";
  const { musicDbA, musicCrestDb, atLeast } = toSeatSource(snapshot);
  if (musicDbA === null) return `Hearing loss is permanent. ${always}`;
  const allowedS = computeAllowedS(Math.ceil(musicDbA - 1e-9), WEEK_RULES.adult);
  const reach = `Music is estimated to reach ${atLeast ? "at least " : ""}${Math.floor(musicDbA + 1e-9)}${NBSP}dB(A) at 1${NBSP}m from one loudspeaker (crest ${formatPlain(musicCrestDb)}${NBSP}dB)`;
  const time =
    allowedS < 15 * 60
      ? "not without hearing protection."
      : `a week\u2019s allowance is then used up in ${toTimeText(allowedS)}.`;
  const louder = atLeast ? " It can play louder; then the time is shorter." : "";
  return `Hearing loss is permanent. ${reach}; ${time}${louder} ${always}`;
}

/** How it was measured, and what it is not. */
export const toReportMethod = (snapshot: Snapshot): string =>
  `${toMeasuredWords(snapshot)} In each third-octave band the limit is the highest level under ${toLimitWords(snapshot.criterion)}, at that level and every lower one tested. Allowance: WHO\u2013ITU H.870, written for personal audio devices and applied here to loudspeakers. Not a conformity test to any standard named.`;

/** Name and words of each fact. */
export function toReportFacts(
  snapshot: Snapshot,
  timeZone: string,
): readonly (readonly [name: string, words: string])[] {
  const { lab, loudspeaker, measured, sign_off, analysis } = snapshot;
  const day = (at: string): string => toLongDay(new Date(at), timeZone);
  const serial = loudspeaker.serial === "" ? "" : `, serial ${loudspeaker.serial}`;
  return [
    ["measured", `${day(measured.first_recording_at)}, ${lab.name}`],
    ["sample", `one unit${serial}, ${snapshot.supplied_by}`],
    [
      "analysis",
      `version ${analysis.version}, engine ${analysis.engine_version}, ${toChangedWords(snapshot.bands)}`,
    ],
    ["signed off", `${day(sign_off.at)}, ${sign_off.by}`],
    ["published", `${day(snapshot.published_at)}, ${snapshot.published_by}`],
    ...(snapshot.uncertainty_dB === null
      ? []
      : [
          [
            "uncertainty",
            `compression at most \u00b1${snapshot.uncertainty_dB.toFixed(1)}${NBSP}dB; ${toSplUncertaintyWords(snapshot.bands)}; k = 2, this one unit`,
          ] as const,
        ]),
  ];
}
