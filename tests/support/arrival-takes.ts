/** A good series of an invented loudspeaker with its arrival reports, and faults to put into its takes. */
import { toByteSource } from "../../lib/audio/byte-source";
import { readRecording } from "../../lib/audio/read-recording";
import { writeWav } from "../../lib/audio/write-wav";
import { labSettingsSchema } from "../../lib/labs/settings-schema";
import type { ArrivalSibling } from "../../lib/runs/arrival/arrival-request";
import { checkArrival } from "../../lib/runs/arrival/check-arrival";
import { toVerdict } from "../../lib/runs/arrival/verdict";
import type { ArrivalReport } from "../../lib/runs/arrival-schema";
import { planSchema } from "../../lib/series/plan-schema";
import { toFileStem, toPlannedRuns } from "../../lib/series/planned-runs";
import { DEMO_LABS } from "../../scripts/demo/demo-labs";
import { recordSeries } from "../../scripts/demo/record-series";
import { createNormal } from "./simulated-sweep";

export const RATE_HZ = 48_000;
const plan = planSchema.parse({
  levels: [76, 86, 96].map((level_dB) => ({ level_dB })),
  sweep: { length_s: 4 },
  place: { environment: "anechoic" },
});
const planned = toPlannedRuns(plan, toFileStem("Osier 8A"));
const limits = labSettingsSchema.parse({}).arrival;

/** By slot: samples of the good takes, and their reports in the order of capture. */
const good = new Map<string, Float64Array>();
export const reports: ArrivalSibling[] = [];

export async function check(
  slot: string,
  channels: readonly Float64Array[],
  {
    siblings = [],
    rateHz = RATE_HZ,
  }: { siblings?: readonly ArrivalSibling[]; rateHz?: number } = {},
): Promise<ArrivalReport> {
  const bytes = writeWav(channels, rateHz, "pcm24");
  return checkArrival({
    run: {
      file: `${slot}.wav`,
      digest: slot,
      channel: 1,
      place: planned.find((run) => run.slot === slot) ?? null,
    },
    plan,
    limits,
    engineVersion: "1.0.0",
    siblings,
    open: () => toByteSource(bytes),
  });
}

/** Fills the takes and reports, once per file of tests. */
export async function recordGoodSeries(): Promise<void> {
  const model = DEMO_LABS[0]?.series.find(({ key }) => key === "osier8a");
  if (model === undefined) throw new Error("the demo labs have no Osier 8A any more");
  for (const { run, makeWav } of recordSeries({
    ...model,
    plan,
    recorded: "all",
    mishaps: {},
  })) {
    const { recording } = await readRecording(toByteSource(makeWav()), { file: run.fileName });
    const samples = Float64Array.from(recording.samples);
    good.set(run.slot, samples);
    const report = await check(run.slot, [samples], { siblings: reports });
    reports.push({
      file: run.fileName,
      digest: `other-${run.slot}`,
      channel: 1,
      place: run,
      state: toVerdict(report),
      report,
    });
  }
}

export const take = (slot: string): Float64Array => {
  const samples = good.get(slot);
  if (samples === undefined) throw new Error(`no take of ${slot}`);
  return samples;
};
export const times = (slot: string, gainDb: number) =>
  take(slot).map((x) => x * 10 ** (gainDb / 20));
const peakOf = (samples: Float64Array) => samples.reduce((top, x) => Math.max(top, Math.abs(x)), 0);
export const overdrive = (slot: string, over: number): Float64Array => {
  const gain = over / peakOf(take(slot));
  return take(slot).map((x) => Math.max(-1, Math.min(1, gain * x)));
};
/** A knock at the stand while the sweep passes a frequency: twice full scale, gone within a tenth of a second. */
export const bump = (slot: string, hz: number): Float64Array => {
  const from = at(passes(slot, hz));
  return take(slot).map((x, n) => {
    const s = (n - from) / RATE_HZ;
    const knock = s < 0 ? 0 : 2 * Math.exp(-s / 0.02) * Math.cos(2 * Math.PI * 90 * s);
    return Math.max(-1, Math.min(1, x + knock));
  });
};
export const at = (seconds: number): number => Math.round(seconds * RATE_HZ);
export const cut = (slot: string, from: number, count: number, insert = 0): Float64Array => {
  const samples = take(slot);
  return Float64Array.from([
    ...samples.subarray(0, from),
    ...new Float64Array(insert),
    ...samples.subarray(from + count),
  ]);
};
const reportOf = (slot: string): ArrivalReport => {
  const report = reports.find(({ place }) => place?.slot === slot)?.report;
  if (report == null) throw new Error(`no report of ${slot}`);
  return report;
};
/** When the sweep of a take passes a frequency, s. */
export const passes = (slot: string, hz: number): number => {
  const { from_s, to_s } = reportOf(slot).envelope;
  return from_s + ((to_s - from_s) * Math.log(hz / 20)) / Math.log(1000);
};
export const before = (slot: string): ArrivalSibling[] =>
  reports.slice(
    0,
    reports.findIndex(({ place }) => place?.slot === slot),
  );
export const tone = (hz: number, level: (timeS: number) => number): Float64Array =>
  Float64Array.from(
    { length: 6 * RATE_HZ },
    (_, n) => level(n / RATE_HZ) * Math.sin((2 * Math.PI * hz * n) / RATE_HZ),
  );
export const withNoise = (slot: string, rms: number): Float64Array => {
  const normal = createNormal(11);
  return take(slot).map((x) => x + rms * normal());
};
/** Second harmonic of a sine of this peak: a x^2 gives a share of a peak / 2. */
export const square = (slot: string, share: number): Float64Array => {
  const samples = take(slot);
  const a = (2 * share) / peakOf(samples);
  return samples.map((x) => x + a * x * x);
};
/** Turns down at once and up slowly, as a recorder's automatic gain does. */
export const rideGain = (slot: string): Float64Array => {
  const samples = take(slot);
  const target = peakOf(samples) / 8;
  let level = 0;
  return samples.map((x) => {
    level = Math.max(Math.abs(x), level * Math.exp(-1 / (2 * RATE_HZ)));
    return level > target ? (x * target) / level : x;
  });
};
