/** Distortion of one band and run in words and figures. A THD value names its reference and orders. */
import type { Band, BandLevel, ResultRun } from "../result/result-schema";
import { formatDb, formatFrequency, formatLevel, formatPercent } from "./format";

/** "96 dB run", "102 dB long-term run". */
export const sayRun = (run: Pick<ResultRun, "level_dB" | "kind">): string =>
  run.kind === "short-term"
    ? `${formatLevel(run.level_dB)} run`
    : `${formatLevel(run.level_dB)} ${run.kind} run`;

interface Item {
  readonly name: string;
  readonly value: string;
}

/** Orders as the result gives them, "2-7", with their letters: "H2–H7". */
export const sayOrders = (orders: string): string =>
  orders === ""
    ? ""
    : orders
        .split("-")
        .map((order) => `H${order}`)
        .join("\u2013");

function sayPercent(percent: number | null, quality: BandLevel["thd_quality"]): string {
  if (quality === null) return "not assessed";
  if (percent === null || quality === "noise") return "in the noise";
  return quality === "uncertain" ? `${formatPercent(percent)}, uncertain` : formatPercent(percent);
}

/**
 * The readout under the figure: subject "2 kHz, 96 dB run", then measured level, THD with its
 * orders, the shown harmonics and the floor.
 */
export function toDistortionReadout(
  band: Band,
  run: ResultRun,
  orders: readonly number[],
): { subject: string; items: Item[] } {
  const subject = `${formatFrequency(band.nominal_Hz)}, ${sayRun(run)}`;
  const level = band.levels.find((candidate) => candidate.file === run.file);
  if (level === undefined)
    return { subject, items: [{ name: "band", value: "not measured in this run" }] };
  const floor = level.harmonics.find((h) => h.order === 2)?.floor_percent ?? null;
  const named = sayOrders(level.thd_orders);
  return {
    subject,
    items: [
      ...(level.spl_dB === null ? [] : [{ name: "measured", value: formatDb(level.spl_dB) }]),
      {
        name: "THD_F",
        value: `${sayPercent(level.thd_percent, level.thd_quality)}${named === "" ? "" : ` (${named})`}`,
      },
      ...orders.map((order) => {
        const harmonic = level.harmonics.find((h) => h.order === order);
        return {
          name: `H${order}`,
          value: sayPercent(harmonic?.percent ?? null, harmonic?.quality ?? null),
        };
      }),
      ...(floor === null ? [] : [{ name: "floor", value: formatPercent(floor) }]),
    ],
  };
}

/** The band in which a run distorts most; only measured values count. null where none is measured. */
export function findWorstThd(
  bands: readonly Band[],
  run: Pick<ResultRun, "file">,
): { hz: number; percent: number } | null {
  let worst: { hz: number; percent: number } | null = null;
  for (const band of bands) {
    const level = band.levels.find((candidate) => candidate.file === run.file);
    if (level === undefined || level.thd_percent === null || level.thd_quality !== "measured")
      continue;
    if (worst === null || level.thd_percent > worst.percent) {
      worst = { hz: band.nominal_Hz, percent: level.thd_percent };
    }
  }
  return worst;
}

/** One sentence for who does not see the figure. */
export function sayDistortion(bands: readonly Band[], run: ResultRun): string {
  const worst = findWorstThd(bands, run);
  return worst === null
    ? `Distortion of the ${sayRun(run)}: below the noise in every band`
    : `Distortion of the ${sayRun(run)}: THD is largest at ${formatFrequency(worst.hz)}, ${formatPercent(worst.percent)}`;
}

/**
 * Beside a small figure: "THD 1.4 %" of the band under the crosshair, else the largest of the run,
 * "THD 3.3 % at 40 Hz". An uncertain value is never said bare.
 * @param nominalHz band under the crosshair; null where there is none.
 */
export function sayThdBeside(
  bands: readonly Band[],
  run: Pick<ResultRun, "file">,
  nominalHz: number | null,
): string {
  const band = bands.find((candidate) => candidate.nominal_Hz === nominalHz);
  if (band === undefined) {
    const worst = findWorstThd(bands, run);
    return worst === null
      ? "THD in the noise"
      : `THD ${formatPercent(worst.percent)} at ${formatFrequency(worst.hz)}`;
  }
  const level = band.levels.find((candidate) => candidate.file === run.file);
  if (level === undefined || level.thd_percent === null) return "THD in the noise";
  const about = level.thd_quality === "measured" ? "" : "about ";
  return `THD ${about}${formatPercent(level.thd_percent)}`;
}
