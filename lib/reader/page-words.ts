/** Sentences of the public page that are computed from the snapshot. */
import {
  formatCriterionPercent,
  formatDb,
  formatFrequency,
  formatLevel,
  formatList,
  formatPlain,
  NBSP,
} from "../charts/format";
import { PLACE_WORDS } from "../compare/space";
import { toMaxLevelNotice, type HearingNotice } from "../exposure/notices";
import type { Snapshot } from "../publication/snapshot-schema";
import { toHeadlineSentences } from "../result/headline-words";
import type { Criterion } from "../series/series-schema";
import type { SeatSource } from "./seat";
import { toPartsOfSound } from "./parts-of-sound";
import { sayDistance, type Units } from "./units";

/** The answer: one or two sentences, or why there is none. */
export function toAnswer(snapshot: Pick<Snapshot, "headline" | "headline_missing">): string[] {
  return snapshot.headline === null
    ? [snapshot.headline_missing ?? "This test gives no single figure."]
    : toHeadlineSentences(snapshot.headline);
}

/** "10 % distortion or 3 dB compression". */
export function toLimitWords(criterion: Criterion): string {
  const parts: string[] = [];
  if (criterion.thd_percent !== undefined) {
    parts.push(`${formatCriterionPercent(criterion.thd_percent)} distortion`);
  }
  if (criterion.compression_dB !== undefined) {
    parts.push(`${formatPlain(criterion.compression_dB)}${NBSP}dB compression`);
  }
  return parts.join(" or ");
}

/** How long a logarithmic sweep stays in one third of an octave, s. */
const toBandS = ({ start_Hz, stop_Hz, length_s }: Snapshot["measured"]["sweep"]): number =>
  length_s / (3 * Math.log2(stop_Hz / start_Hz));

/** Stands with every figure of a publication. */
export function toMethodWords(
  snapshot: Pick<Snapshot, "measured" | "criterion">,
  units: Units = "m",
): string {
  const bandS = toBandS(snapshot.measured.sweep).toFixed(1);
  return `Sine sweep, one tone at a time, about ${bandS}${NBSP}s per band, unweighted, level at ${sayDistance(1, units)}; limit: ${toLimitWords(snapshot.criterion)}. Music differs.`;
}

/**
 * The hearing notice of a view that shows this publication's levels; null where no level stands in it.
 * Where no absolute level holds, the levels of the runs stand in the view, and count.
 */
export function toPublishedNotice(
  snapshot: Pick<Snapshot, "bands" | "loudspeaker">,
): HearingNotice | null {
  const levels = snapshot.bands.flatMap((band) => [
    band.limit.spl_dB ?? [],
    ...band.levels.map((level) => level.spl_dB ?? []),
  ]);
  const absolute = levels.flat();
  const runs = snapshot.bands.flatMap((band) => band.levels.map((level) => level.level_dB));
  const shown = absolute.length === 0 ? runs : absolute;
  if (shown.length === 0) return null;
  return toMaxLevelNotice({
    levelDb: Math.max(...shown),
    distanceM: 1,
    atLeast: snapshot.bands.some((band) => band.limit.status === "not reached"),
    stage: snapshot.loudspeaker.kind.includes("stage"),
  });
}

/** What the seat calculator starts from: the estimate for music, its spectrum by IEC 60268-1 where there is one. */
export function toSeatSource(
  snapshot: Pick<Snapshot, "programme" | "bands" | "measured">,
): SeatSource {
  const estimates = snapshot.programme.filter((one) => one.spl_dBA !== null);
  const estimate = estimates.find((one) => one.spectrum === "iec-60268-1") ?? estimates[0] ?? null;
  return {
    musicDbA: estimate?.spl_dBA ?? null,
    musicCrestDb: estimate?.crest_dB ?? 12,
    atLeast: estimate?.at_least ?? false,
    parts: toPartsOfSound(snapshot).map(({ name, reachedDb, atLeast, belowLowest }) => ({
      name,
      reachedDb,
      atLeast,
      belowLowest,
    })),
  };
}

/** How the test went, in one paragraph. */
export function toMeasuredWords(snapshot: Pick<Snapshot, "measured">, units: Units = "m"): string {
  const { sweep, levels_dB, long_term_levels_dB, distance_m, environment } = snapshot.measured;
  const levels = formatList(levels_dB.map((level) => formatPlain(level)));
  const longTerm =
    long_term_levels_dB.length === 0
      ? ""
      : `, and at ${formatList(long_term_levels_dB.map(formatLevel))} again after conditioning noise`;
  return `One loudspeaker played a sine sweep of ${formatPlain(Math.round(sweep.length_s))} seconds, one tone at a time, at ${levels}${NBSP}dB${longTerm}. The microphone stood ${sayDistance(distance_m, units)} away ${PLACE_WORDS[environment]}; levels are stated for 1${NBSP}m.`;
}

/** "1 of 27 causes changed by the analyst". */
export function toChangedWords(bands: Snapshot["bands"]): string {
  const changed = bands.filter((band) => band.cause_changed).length;
  return changed === 0
    ? `all ${bands.length} causes confirmed by the analyst`
    : `${changed} of ${bands.length} causes changed by the analyst`;
}

/**
 * "absolute SPL ±0.9 dB at 1 kHz, at most ±3.4 dB (8 kHz)": calibrator, microphone, place and
 * repeat, of which compression is free.
 */
export function toSplUncertaintyWords(
  bands: readonly Pick<Snapshot["bands"][number], "nominal_Hz" | "spl_uncertainty_dB">[],
): string {
  const known = bands.flatMap(({ nominal_Hz: hz, spl_uncertainty_dB: db }) =>
    db == null ? [] : [{ hz, db }],
  );
  const worst = known.toSorted((a, b) => b.db - a.db)[0];
  const middle = known.find(({ hz }) => hz === 1000) ?? known[Math.floor(known.length / 2)];
  if (worst === undefined || middle === undefined)
    return "calibrator, microphone and distance come on top of that in an absolute level";
  const say = ({ hz, db }: { hz: number; db: number }): string =>
    `\u00b1${formatDb(db)} at ${formatFrequency(hz)}`;
  return middle.db === worst.db
    ? `absolute SPL ${say(middle)}`
    : `absolute SPL ${say(middle)}, at most ${say(worst)}`;
}
