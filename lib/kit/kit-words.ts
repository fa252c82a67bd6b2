/** What goes with every part of the summary kit: answer, method line, hearing notice, source. */
import { formatFrequency, formatLevel } from "../charts/format";
import type { Snapshot } from "../publication/snapshot-schema";
import { toAnswer, toMethodWords, toPublishedNotice } from "../reader/page-words";
import { toPartsOfSound, toReachedWords } from "../reader/parts-of-sound";
import { toLongDay } from "../time/time-words";
import { toNoticeSentence } from "./notice-sentence";

/** "Osier 8A by Withy Lane". */
export const toName = ({ loudspeaker: { maker, model } }: Snapshot): string =>
  maker === "" ? model : `${model} by ${maker}`;

/** "Reedholm Test Lab, 14 May 2026". */
export const toSource = (snapshot: Snapshot, timeZone: string): string =>
  `${snapshot.lab.name}, ${toLongDay(new Date(snapshot.published_at), timeZone)}`;

/** What the marks of the wall mean, in as many words as a picture has room for. */
export function toMarkWords({ bands, measured }: Snapshot): string {
  const open = bands.some((band) => band.limit.status === "not reached");
  const highest = formatLevel(Math.max(...measured.levels_dB));
  return open ? `open line: not reached up to the ${highest} run` : "line: the limit of the band";
}

/** A paragraph of plain text for the article: it loses nothing when it is copied. */
export function toArticleSentence(snapshot: Snapshot, timeZone: string): string {
  const notice = toPublishedNotice(snapshot);
  return [
    `${toName(snapshot)}:`,
    ...toAnswer(snapshot),
    toMethodWords(snapshot),
    ...(notice === null ? [] : [`Hearing: ${notice.lead} ${notice.text}`]),
    `(${toSource(snapshot, timeZone)}, one unit, revision ${snapshot.revision}.)`,
  ].join(" ");
}

/** The figure in words, for those who do not see it. */
export function toAltText(snapshot: Snapshot): string {
  const { bands } = snapshot;
  const [first, last] = [bands[0], bands.at(-1)];
  const range =
    first === undefined || last === undefined
      ? ""
      : `, ${formatFrequency(first.nominal_Hz)} to ${formatFrequency(last.nominal_Hz)}`;
  const parts = toPartsOfSound(snapshot).map(
    (part) => `${part.name.toLowerCase()} ${toReachedWords(part)}`,
  );
  const notice = toPublishedNotice(snapshot);
  return [
    `Output limit of ${toName(snapshot)} in ${bands.length} third-octave bands${range}.`,
    ...toAnswer(snapshot),
    ...(parts.length === 0 ? [] : [`By part of the sound: ${parts.join("; ")}.`]),
    toMethodWords(snapshot),
    ...(notice === null ? [] : [toNoticeSentence(notice)]),
  ].join(" ");
}
