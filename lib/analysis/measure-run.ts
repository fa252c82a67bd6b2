/** One recording, from samples to the power of each order in each cell of the grid, with its floor. */
import { measureCellPower, type Plans } from "./cell-power";
import { estimateDriftPpm } from "./drift";
import {
  measureNoise,
  measureResponseNoise,
  toNoiseCells,
  toNoiseGain,
  type NoiseDensity,
} from "./noise-floor";
import type { OrderWindow } from "./order-windows";
import { meanInBand } from "./mean-in-band";
import { measurePeak } from "./measure-peak";
import type { FoundSweep, SweepFinder } from "./sweep-in-recording";
import type { MicrophoneResponse } from "./microphone";
import type { OnProgress, Recording } from "./types";

/** What is the same for every run of a series. */
export interface MeasuringContext {
  finder: SweepFinder;
  plans: Plans;
  /** [cells + 1] edges of excitation frequency, Hz. */
  edgeHz: Float64Array;
  /** Orders 1 to 9. */
  windows: OrderWindow[];
  gate: OrderWindow | null;
  ambient: NoiseDensity | null;
  microphone: MicrophoneResponse | null;
  /** Mean-square band in which the level of a run is defined. */
  referenceBandHz: readonly [number, number];
}

/** Powers are recorded peak^2 re full scale per steady sine of the sweep's amplitude, microphone taken out. */
export interface OrderPower {
  order: number;
  /** [cells] noise included. */
  power: Float64Array;
  /** [cells] expected noise in it. */
  floor: Float64Array;
  /** Length of the window, s. */
  windowS: number;
}

export interface RawRun {
  /** [9] orders 1 to 9. */
  orders: OrderPower[];
  /** [cells] gated fundamental; null without a gate. */
  gatedPower: Float64Array | null;
  latencyS: number;
  driftPpm: number;
  peakDbfs: number;
  /** Mean of the recording, full scale = 1. */
  mean: number;
  clipped: boolean;
  snrDb: number;
  /** Samples of the sweep that the recording lacks. */
  missing: number;
  /** Level of the loopback channel, dB re full scale, and whether latency and drift come from it. */
  loopbackDb: number | null;
  /** What a table states in place of a recording. */
  stated?: {
    /** [cells] THD as a power ratio to the fundamental; null without such a column. */
    thd: Float64Array | null;
  };
}

export interface RunShape {
  kind: string;
  sweeps?: number | undefined;
  periodS?: number | undefined;
}

const SILENCE_GUARD_S = 0.02;
const DECAY_GUARD_S = 0.5;
const LONGEST_SILENCE_S = 2;
const SHORTEST_SILENCE_S = 0.25;
/** What leaks from the linear response into another order's window, as power. */
const LEAKAGE = 1e-11;

/**
 * @throws AnalysisError "run.silent", "run.no-sweep"
 */
export function measureRun(
  recording: Recording,
  shape: RunShape,
  context: MeasuringContext,
  onProgress?: OnProgress,
): RawRun {
  const loopback =
    recording.loopback === undefined ? null : measureLoopback(recording, shape, context);
  const first = context.finder.find(recording, shape.sweeps);
  return measureFoundRun(recording, first, shape, context, { loopback, onProgress });
}

/** @param first the sweep of this recording, the last thing that the finder deconvolved. */
export function measureFoundRun(
  recording: Recording,
  first: FoundSweep,
  shape: RunShape,
  context: MeasuringContext,
  {
    loopback = null,
    onProgress,
  }: { loopback?: Loopback | null; onProgress?: OnProgress | undefined } = {},
): RawRun {
  const { finder, plans } = context;
  const { file } = recording;
  const { sweep } = finder.stimulus;
  const tell = (stage: "aligned" | "harmonics" | "floor", done: number): void =>
    onProgress?.({ file, stage, done, total: 3 });
  tell("aligned", 1);
  const driftPpm =
    loopback?.driftPpm ?? estimateDriftPpm(first.deconvolved.response, first.lag, sweep, plans);
  const ownNoise =
    context.ambient === null
      ? measureResponseNoise(first.deconvolved.response, first.lag, sweep, plans)
      : null;
  const measured = measureOrders(first, context);
  const { orders, gatedPower } = measured;
  const { stimulusAt, missing } = first;
  const others = toLaterSweeps(shape, recording, stimulusAt, context);
  others.forEach((at) => addSweep(measured, finder.findNear(recording, at), context));
  divide(measured, others.length + 1);
  tell("harmonics", 2);
  const silence = measureSilence(recording, stimulusAt, shape, context);
  const rounding = recording.fullScale < 1 ? (1 - recording.fullScale) ** 2 / 12 : 2 ** -48 / 12;
  const ambient = context.ambient ?? (silence === null ? ownNoise : null);
  const sources = { ambient, silence, rounding };
  setFloors(orders, sources, context, others.length + 1);
  applyMicrophone(orders, gatedPower, context);
  tell("floor", 3);
  return {
    orders,
    gatedPower,
    latencyS: (loopback?.stimulusAt ?? stimulusAt) / sweep.rateHz,
    driftPpm,
    ...measurePeak(recording),
    snrDb: toSnrDb(orders[0]!, sources, context),
    missing,
    loopbackDb: loopback?.levelDb ?? null,
  };
}

interface Loopback {
  stimulusAt: number;
  driftPpm: number;
  levelDb: number;
}

interface MeasuredOrders {
  orders: OrderPower[];
  gatedPower: Float64Array | null;
}

function measureOrders(
  { deconvolved, lag }: FoundSweep,
  { windows, gate, edgeHz, finder, plans }: MeasuringContext,
): MeasuredOrders {
  const { rateHz } = finder.stimulus.sweep;
  const measure = (window: OrderWindow): Float64Array =>
    measureCellPower(deconvolved.response, lag, window, edgeHz, rateHz, plans);
  const orders = windows.map((window): OrderPower => ({
    order: window.order,
    power: measure(window),
    floor: new Float64Array(edgeHz.length - 1),
    windowS: window.energyS,
  }));
  return { orders, gatedPower: gate === null ? null : measure(gate) };
}

/** Adds one more sweep of a train to the sums of power. */
function addSweep(sum: MeasuredOrders, found: FoundSweep, context: MeasuringContext): void {
  const more = measureOrders(found, context);
  const add = (into: Float64Array, power: Float64Array): void =>
    power.forEach((p, c) => (into[c]! += p));
  sum.orders.forEach(({ power }, i) => add(power, more.orders[i]!.power));
  if (sum.gatedPower !== null && more.gatedPower !== null) add(sum.gatedPower, more.gatedPower);
}

function divide({ orders, gatedPower }: MeasuredOrders, sweeps: number): void {
  if (sweeps === 1) return;
  for (const power of [...orders.map((o) => o.power), ...(gatedPower === null ? [] : [gatedPower])])
    power.forEach((p, c) => (power[c] = p / sweeps));
}

/**
 * Where the later sweeps of a train begin. A long-term run is read from its first sweep alone: the
 * coil cools from then on (docs/domain.md section 5).
 */
function toLaterSweeps(
  { kind, sweeps = 1, periodS }: RunShape,
  recording: Recording,
  stimulusAt: number,
  { finder }: MeasuringContext,
): number[] {
  if (kind === "long-term" || periodS === undefined) return [];
  const { sweepStart, sweepLength } = finder.stimulus;
  return Array.from(
    { length: sweeps - 1 },
    (_, i) => stimulusAt + (i + 1) * periodS * recording.rateHz,
  ).filter((at) => at + sweepStart + sweepLength <= recording.samples.length);
}

function measureLoopback(
  recording: Recording,
  shape: RunShape,
  context: MeasuringContext,
): Loopback | null {
  const { finder, plans, edgeHz, windows } = context;
  const { sweep } = finder.stimulus;
  const samples = recording.loopback;
  if (samples === undefined) return null;
  const found = finder.find(
    { ...recording, samples, file: `${recording.file} (loopback)` },
    shape.sweeps,
  );
  const cells = measureCellPower(
    found.deconvolved.response,
    found.lag,
    windows[0]!,
    edgeHz,
    sweep.rateHz,
    plans,
  );
  return {
    stimulusAt: found.stimulusAt,
    driftPpm: estimateDriftPpm(found.deconvolved.response, found.lag, sweep, plans),
    levelDb: 10 * Math.log10(meanInBand(cells, edgeHz, context.referenceBandHz)),
  };
}

/** The run's own silence: before the sweep, or after its decay; none beside a conditioning signal. */
function measureSilence(
  recording: Recording,
  stimulusAt: number,
  { kind, sweeps = 1 }: RunShape,
  context: MeasuringContext,
): NoiseDensity | null {
  if (kind === "long-term") return null;
  const { samples, rateHz } = recording;
  const { sweepStart, sweepLength } = context.finder.stimulus;
  const start = Math.round(stimulusAt + sweepStart - SILENCE_GUARD_S * rateHz);
  const before = samples.subarray(
    Math.max(0, start - LONGEST_SILENCE_S * rateHz),
    Math.max(0, start),
  );
  if (before.length >= SHORTEST_SILENCE_S * rateHz || sweeps > 1)
    return measureNoise(before, rateHz, context.plans);
  const end = Math.round(stimulusAt + sweepStart + sweepLength + DECAY_GUARD_S * rateHz);
  return measureNoise(
    samples.subarray(Math.max(0, end), end + LONGEST_SILENCE_S * rateHz),
    rateHz,
    context.plans,
  );
}

function setFloors(
  orders: OrderPower[],
  sources: Parameters<typeof toNoiseCells>[0],
  context: MeasuringContext,
  sweeps: number,
): void {
  const { edgeHz, finder, windows, plans } = context;
  const { rateConstantS, rateHz } = finder.stimulus.sweep;
  const fundamental = orders[0]!.power;
  orders.forEach((order, i) => {
    // The mean over a train is a mean of powers: its noise does not fall, only its scatter.
    const gain = toNoiseGain(windows[i]!.energyS, rateConstantS);
    const noise = toNoiseCells(sources, edgeHz, order.order, rateHz, plans);
    for (let c = 0; c < noise.length; c += 1) {
      order.floor[c] = gain * noise[c]! + (order.order > 1 ? LEAKAGE * fundamental[c]! : 0);
    }
    order.windowS = windows[i]!.energyS * sweeps;
  });
}

function applyMicrophone(
  orders: OrderPower[],
  gatedPower: Float64Array | null,
  { microphone, edgeHz }: MeasuringContext,
): void {
  if (microphone === null) return;
  orders.forEach(({ order, power, floor }) => {
    for (let c = 0; c < power.length; c += 1) {
      const gain =
        10 ** (-microphone.toResponseDb(order * Math.sqrt(edgeHz[c]! * edgeHz[c + 1]!)) / 10);
      power[c]! *= gain;
      floor[c]! *= gain;
      if (order === 1 && gatedPower !== null) gatedPower[c]! *= gain;
    }
  });
}

/** Sweep over noise within the reference band, both as a level meter would read them there. */
function toSnrDb(
  { power }: OrderPower,
  sources: Parameters<typeof toNoiseCells>[0],
  { edgeHz, referenceBandHz, finder, plans }: MeasuringContext,
): number {
  const signal = meanInBand(power, edgeHz, referenceBandHz) / 2;
  const density = meanInBand(
    toNoiseCells(sources, edgeHz, 1, finder.stimulus.sweep.rateHz, plans),
    edgeHz,
    referenceBandHz,
  );
  // Mean of f S(f) over ln f times the span in ln f is the integral of S over f.
  return 10 * Math.log10(signal / (density * Math.log(referenceBandHz[1] / referenceBandHz[0])));
}
