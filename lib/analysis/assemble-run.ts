/** From raw powers to what the back of the engine and the result need of a run. */
import type { Quality } from "../result/result-schema";
import type { Run } from "../series/series-schema";
import { CELLS_PER_BAND, toFirstCellOf, type Grid } from "./bands";
import { meanInBand } from "./mean-in-band";
import type { OrderPower, RawRun } from "./measure-run";
import { HARMONIC_ORDERS, toOrdersText } from "./orders";
import type { BandMeasure, MeasuredRun, ThirdOctave } from "./types";

/** [cells] fundamental of a run, floor subtracted. */
export const toLowResponse = (raw: RawRun): Float64Array => subtractFloor(raw.orders[0]!);

/** 14 dB over the floor is measured, 6 to 14 dB uncertain (docs/domain.md section 4). */
const MEASURED_RATIO = 10 ** 1.4;
const UNCERTAIN_RATIO = 10 ** 0.6;
/** 10 lg of a power ratio of 1 + x is 4.34 x for small x. */
const DB_PER_SHARE = 10 / Math.LN10;

export interface AssemblyContext {
  grid: Grid;
  bands: ThirdOctave[];
  /** [cells] whether the fundamental is measured there. */
  fundamentalValid: boolean[];
  /** [cells] whether SPL is given there: false throughout where the place gives none. */
  splValid: boolean[];
  topHz: number;
  /** SPL at 1 m of a recorded sine that just reaches full scale, dB. */
  fullScaleDb: number;
  referenceBandHz: readonly [number, number];
  /** Noise that the gate lets through, of that in the ungated window. */
  gateNoiseShare: number;
  /** [cells] fundamental of the quietest plain short-term run, floor subtracted: it refers harmonics to the input. */
  lowResponse: Float64Array;
}

/** @param run as the series names it; driveDb as it was really applied. */
export function assembleRun(
  raw: RawRun,
  run: Run,
  driveDb: number,
  context: AssemblyContext,
): MeasuredRun {
  const { grid, fullScaleDb, splValid, fundamentalValid } = context;
  const fundamental = raw.orders[0]!;
  const clean = subtractFloor(fundamental);
  const toDb = (power: number): number => 10 * Math.log10(power) + fullScaleDb;
  const levelCurveDb = clean.map((p, c) =>
    fundamentalValid[c] === true && isAbove(p, fundamental.floor[c]!) ? toDb(p) : Number.NaN,
  );
  const splSource =
    raw.gatedPower === null
      ? clean
      : raw.gatedPower.map((p, c) => p - context.gateNoiseShare * fundamental.floor[c]!);
  const splDb = splSource.map((p, c) =>
    splValid[c] === true && !Number.isNaN(levelCurveDb[c]!) && p > 0 ? toDb(p) : Number.NaN,
  );
  const harmonics = HARMONIC_ORDERS.map((order) =>
    toHarmonicCurve(raw.orders[order - 1]!, clean, splDb, context),
  );
  const thd = Array.from(grid.centreHz, (_, c) => toCellThd(raw, clean, c, context));
  return {
    file: run.file,
    levelDb: run.level_dB,
    driveDb,
    kind: run.kind,
    variant: run.variant,
    conditioning: run.conditioning,
    ...(raw.stated === undefined ? {} : { isTable: true }),
    measuredLevelDb: toDb(meanInBand(splSource, grid.edgeHz, context.referenceBandHz)),
    latencyS: raw.latencyS,
    driftPpm: raw.driftPpm,
    peakDbfs: raw.peakDbfs,
    clipped: raw.clipped,
    snrDb: raw.snrDb,
    splDb,
    floorDb: fundamental.floor.map((p, c) =>
      splValid[c] === true && fundamentalValid[c] === true ? toDb(p) : Number.NaN,
    ),
    levelCurveDb,
    harmonics: harmonics.filter((h) => h.quality.some((q) => q !== null)),
    thdPercent: Float64Array.from(thd, (t) => t.percent),
    thdQuality: thd.map((t) => t.quality),
    thdOrders: thd.map((t) => t.orders),
    bands: context.bands.map((band) => toBandMeasure(raw, band, splDb, context)),
  };
}

function subtractFloor({ power, floor }: OrderPower): Float64Array {
  return power.map((p, c) => p - floor[c]!);
}

const isAbove = (clean: number, floor: number): boolean => clean >= UNCERTAIN_RATIO * floor;

function toQuality(clean: number, floor: number): Quality {
  if (clean >= MEASURED_RATIO * floor) return "measured";
  return isAbove(clean, floor) ? "uncertain" : "noise";
}

const orderExists = (order: number, highHz: number, topHz: number): boolean =>
  order * highHz <= topHz * (1 + 1e-9);

function toHarmonicCurve(
  { order, power, floor }: OrderPower,
  clean: Float64Array,
  splDb: Float64Array,
  { grid, topHz, fundamentalValid }: AssemblyContext,
): MeasuredRun["harmonics"][number] {
  const quality = Array.from(power, (p, c): Quality | null =>
    fundamentalValid[c] === true &&
    clean[c]! > 0 &&
    !Number.isNaN(p) &&
    orderExists(order, grid.edgeHz[c + 1]!, topHz)
      ? toQuality(p - floor[c]!, floor[c]!)
      : null,
  );
  // Re the fundamental, so that a gate or a room that is not assessed treats both alike.
  const toSpl = (part: number, c: number): number => splDb[c]! + 10 * Math.log10(part / clean[c]!);
  return {
    order,
    splDb: power.map((p, c) =>
      quality[c] === null || quality[c] === "noise" ? Number.NaN : toSpl(p - floor[c]!, c),
    ),
    floorDb: floor.map((p, c) => (quality[c] === null ? Number.NaN : toSpl(p, c))),
    quality,
  };
}

interface Component {
  order: number;
  /** Floor subtracted. */
  clean: number;
  floor: number;
}

/** All existing orders count, those under the floor with what little is left: so noise adds no bias. */
export function toThd(
  parts: readonly Component[],
  fundamental: number,
): { percent: number; quality: Quality | null; orders: string } {
  if (parts.length === 0 || !(fundamental > 0))
    return { percent: Number.NaN, quality: null, orders: "" };
  let clean = 0;
  let floor = 0;
  for (const part of parts) {
    clean += part.clean;
    floor += part.floor;
  }
  const quality = toQuality(clean, floor);
  return {
    percent: quality === "noise" ? Number.NaN : 100 * Math.sqrt(clean / fundamental),
    quality,
    orders: toOrdersText(parts.map((p) => p.order)),
  };
}

function toCellThd(
  raw: RawRun,
  clean: Float64Array,
  c: number,
  { grid, topHz, fundamentalValid }: AssemblyContext,
) {
  const parts: Component[] = [];
  for (const order of fundamentalValid[c] === true ? HARMONIC_ORDERS : []) {
    const { power, floor } = raw.orders[order - 1]!;
    if (!orderExists(order, grid.edgeHz[c + 1]!, topHz) || Number.isNaN(power[c]!)) continue;
    parts.push({ order, clean: power[c]! - floor[c]!, floor: floor[c]! });
  }
  const ofOrders = toThd(parts, isAbove(clean[c]!, raw.orders[0]!.floor[c]!) ? clean[c]! : 0);
  const stated = raw.stated?.thd?.[c];
  return fundamentalValid[c] === true && stated !== undefined ? stateThd(stated) : ofOrders;
}

/** What a table states counts before the sum of the orders that it happens to hold. */
function stateThd(power: number): ReturnType<typeof toThd> {
  return Number.isFinite(power)
    ? { percent: 100 * Math.sqrt(power), quality: "measured", orders: "" }
    : { percent: Number.NaN, quality: null, orders: "" };
}

function toBandMeasure(
  raw: RawRun,
  band: ThirdOctave,
  splDb: Float64Array,
  context: AssemblyContext,
): BandMeasure {
  const { grid, topHz, fullScaleDb } = context;
  const first = toFirstCellOf(band, grid);
  const mean = (cells: Float64Array): number => {
    let sum = 0;
    for (let c = first; c < first + CELLS_PER_BAND; c += 1) sum += cells[c]!;
    return sum / CELLS_PER_BAND;
  };
  const { power, floor: floors, windowS } = raw.orders[0]!;
  const floor = mean(floors);
  const clean = mean(power) - floor;
  const present = isAbove(clean, floor);
  const fundamental = present ? clean : 0;
  const parts: Component[] = HARMONIC_ORDERS.filter(
    (order) => present && orderExists(order, band.highHz, topHz),
  ).flatMap((order) => {
    const noise = mean(raw.orders[order - 1]!.floor);
    const total = mean(raw.orders[order - 1]!.power);
    return Number.isNaN(total) ? [] : [{ order, clean: total - noise, floor: noise }];
  });
  const statedCells = raw.stated?.thd ?? null;
  const stated =
    statedCells === null || !present
      ? Number.NaN
      : mean(statedCells.map((ratio, c) => ratio * power[c]!)) / mean(power);
  const thd = statedCells === null ? toThd(parts, fundamental) : stateThd(stated);
  const cellSpl = splDb.subarray(first, first + CELLS_PER_BAND);
  return {
    levelDb: present ? 10 * Math.log10(clean) + fullScaleDb : Number.NaN,
    splDb: present
      ? 10 * Math.log10(cellSpl.reduce((sum, db) => sum + 10 ** (db / 10), 0) / CELLS_PER_BAND)
      : Number.NaN,
    sigmaDb: toSigmaDb(floor / clean, (band.highHz - band.lowHz) * windowS),
    snrDb: 10 * Math.log10(clean / floor),
    harmonics: HARMONIC_ORDERS.map((order) => {
      const part = parts.find((p) => p.order === order);
      if (part === undefined)
        return {
          order,
          ratio: Number.NaN,
          floorRatio: Number.NaN,
          quality: null,
          inputRatio: Number.NaN,
        };
      const ratio = Math.max(0, part.clean) / fundamental;
      return {
        order,
        ratio,
        floorRatio: part.floor / fundamental,
        quality: toQuality(part.clean, part.floor),
        inputRatio: ratio * toInputFactor(raw.orders[order - 1]!, first, context),
      };
    }),
    thdPercent: thd.percent,
    thdQuality: thd.quality,
    thdOrders: thd.orders,
    ...(Number.isFinite(stated) ? { statedThd: stated } : {}),
  };
}

/** Standard deviation of a level in noise of a share of its power (docs/onset-notes.md section 4). */
function toSigmaDb(noiseShare: number, freedom: number): number {
  return noiseShare > 0
    ? DB_PER_SHARE * Math.sqrt((2 * noiseShare + noiseShare ** 2) / Math.max(1, freedom))
    : Number.NaN;
}

/**
 * |linear response at f over that at n f|^2, averaged over a band by where the harmonic has its power.
 * NaN where n f leaves what the low run measured.
 */
function toInputFactor(
  { order, power, floor }: OrderPower,
  first: number,
  { grid, lowResponse }: AssemblyContext,
): number {
  let sum = 0;
  let weights = 0;
  for (let c = first; c < first + CELLS_PER_BAND; c += 1) {
    const there = readLog(lowResponse, grid, order * grid.centreHz[c]!);
    const weight = Math.max(power[c]! - floor[c]!, floor[c]!);
    sum += weight * (lowResponse[c]! / there);
    weights += weight;
  }
  return sum / weights;
}

/** Value between cells, linear in the logarithm; NaN outside or where the response is not over its floor. */
function readLog(cells: Float64Array, grid: Grid, frequencyHz: number): number {
  const position = 80 * Math.log10(frequencyHz / grid.centreHz[0]!);
  const c = Math.min(cells.length - 2, Math.floor(position));
  const [a, b] = [cells[c] ?? Number.NaN, cells[c + 1] ?? Number.NaN];
  if (!(a > 0 && b > 0) || position > cells.length - 0.5) return Number.NaN;
  return Math.exp(Math.log(a) + (Math.log(b) - Math.log(a)) * (position - c));
}
