/** A run that was reduced elsewhere to a table: its levels and harmonics in the cells of the grid. */
import { AnalysisError } from "../errors/app-error";
import type { Warning } from "../result/result-schema";
import type { OrderPower, RawRun } from "./measure-run";
import { sayHz, sayNumber } from "./say";
import { HARMONIC_ORDERS } from "./orders";

/** What the engine takes of a table of frequency and level. */
export interface RunTable {
  /** [points] ascending, Hz. */
  frequencyHz: readonly number[];
  /** [points] dB SPL. */
  levelDb: readonly number[];
  thdPercent?: readonly number[];
  harmonics: readonly {
    order: number;
    unit: "dB SPL" | "dB re fundamental" | "percent";
    values: readonly number[];
  }[];
}

const STEPS_PER_CELL = 4;
/** A table says no floor: its numbers are taken to hold down to this, re the fundamental. */
const ASSUMED_FLOOR = 1e-8;
/** Stands for the window that is not known: only the scatter of a level follows from it. */
const ASSUMED_WINDOW_S = 1;

/**
 * @param edgeHz [cells + 1] edges of excitation frequency.
 * @param fullScaleDb the scale on which the powers are kept.
 * @throws AnalysisError "table.not-readable" where the table does not reach into the grid.
 */
export function toTableRun(
  table: RunTable,
  file: string,
  edgeHz: Float64Array,
  fullScaleDb: number,
): RawRun {
  const read = createReader(table.frequencyHz);
  const toPower = (levelDb: readonly number[]): Float64Array =>
    Float64Array.from({ length: edgeHz.length - 1 }, (_, c) => {
      let sum = 0;
      for (let i = 0; i < STEPS_PER_CELL; i += 1) {
        const hz = edgeHz[c]! * (edgeHz[c + 1]! / edgeHz[c]!) ** ((i + 0.5) / STEPS_PER_CELL);
        sum += 10 ** ((read(levelDb, hz) - fullScaleDb) / 10);
      }
      return sum / STEPS_PER_CELL;
    });
  const power = toPower(table.levelDb);
  if (!power.some((p) => p > 0)) {
    throw new AnalysisError(
      "table.not-readable",
      `${file} holds no level within the sweep's range.`,
      { file },
    );
  }
  const floor = power.map((p) => p * ASSUMED_FLOOR);
  const { thdPercent } = table;
  const thd =
    thdPercent === undefined
      ? null
      : toPower(
          thdPercent.map((percent, i) => table.levelDb[i]! + 20 * Math.log10(percent / 100)),
        ).map((p, c) => p / power[c]!);
  const toOrder = (order: number): OrderPower => {
    const found = table.harmonics.find((h) => h.order === order);
    return {
      order,
      power:
        found === undefined ? power.map(() => Number.NaN) : toPower(toLevels(found, table.levelDb)),
      floor,
      windowS: ASSUMED_WINDOW_S,
    };
  };
  const unknown = Number.NaN;
  return {
    orders: [
      { order: 1, power, floor, windowS: ASSUMED_WINDOW_S },
      ...HARMONIC_ORDERS.map(toOrder),
    ],
    gatedPower: null,
    latencyS: unknown,
    driftPpm: unknown,
    peakDbfs: unknown,
    mean: unknown,
    clipped: false,
    snrDb: unknown,
    missing: 0,
    loopbackDb: null,
    stated: { thd },
  };
}

export function toTableWarning(file: string, table: RunTable): Warning {
  const none = sayDistortion(table);
  const coarse = sayCoarse(table.frequencyHz);
  return {
    code: "run.table",
    message: `${file} is a table: noise floor, clipping, latency and the true step are not known. ${none}${coarse === null ? "" : ` ${coarse}`}`,
    file,
  };
}

/** Three rows an octave: one per third octave. */
const COARSE_OCTAVES = 1 / 3 + 0.01;

/** Says where bands are read between rows that lie further apart than a band; null where they do not. */
export function sayCoarse(frequencyHz: readonly number[]): string | null {
  const gaps = frequencyHz.slice(1).map((hz, i) => Math.log2(hz / frequencyHz[i]!));
  const widest = Math.max(...gaps);
  const at = frequencyHz[gaps.indexOf(widest)];
  return widest > COARSE_OCTAVES && at !== undefined
    ? `Its rows lie up to ${sayNumber(widest, 1)} octaves apart (above ${sayHz(Number(at.toPrecision(3)))}): bands there are read from a straight line between two rows.`
    : null;
}

function sayDistortion({ harmonics, thdPercent }: RunTable): string {
  if (harmonics.length > 0 && thdPercent !== undefined)
    return "Its harmonics and its THD are taken as measured.";
  if (harmonics.length > 0) return "Its harmonics are taken as measured.";
  return thdPercent === undefined
    ? "It holds no harmonics, so distortion limits and causes that need them are not assessed."
    : "Its THD is taken as measured; it holds no harmonics, so causes that need them are not assessed.";
}

function toLevels(
  { unit, values }: RunTable["harmonics"][number],
  fundamentalDb: readonly number[],
): number[] {
  if (unit === "dB SPL") return [...values];
  return values.map(
    (value, i) =>
      (fundamentalDb[i] ?? Number.NaN) +
      (unit === "percent" ? 20 * Math.log10(value / 100) : value),
  );
}

/** Linear in dB over ln f; NaN outside the table. */
function createReader(
  frequencyHz: readonly number[],
): (levels: readonly number[], hz: number) => number {
  const ln = frequencyHz.map((f) => Math.log(f));
  return (levels, hz) => {
    const at = Math.log(hz);
    if (at < ln[0]! || at > ln.at(-1)!) return Number.NaN;
    let low = 0;
    let high = ln.length - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (ln[middle]! <= at) low = middle;
      else high = middle;
    }
    const share = (at - ln[low]!) / (ln[high]! - ln[low]!);
    return levels[low]! * (1 - share) + levels[high]! * share;
  };
}
