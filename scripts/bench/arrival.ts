/** The arrival checks of one recording of 15 s at 48 kHz, alone on one core, tables made anew. */
import { synthesiseStimulus } from "../../lib/analysis/sweep";
import { toByteSource } from "../../lib/audio/byte-source";
import { writeWav } from "../../lib/audio/write-wav";
import { labSettingsSchema } from "../../lib/labs/settings-schema";
import { checkArrival } from "../../lib/runs/arrival/check-arrival";
import { planSchema } from "../../lib/series/plan-schema";
import { toPlannedRuns } from "../../lib/series/planned-runs";
import { createRandom } from "../demo/random";
import { type Bench } from "../setup/bench";

const RATE_HZ = 48_000;
const LENGTH_S = 15;
const plan = planSchema.parse({ calibration: { by: "sensitivity", full_scale_dB: 116 } });

let bytes: Uint8Array = new Uint8Array(0);

function recordRun(): Uint8Array {
  const { start_Hz: startHz, stop_Hz: stopHz, length_s: lengthS } = plan.sweep;
  const stimulus = synthesiseStimulus({
    startHz,
    stopHz,
    lengthS,
    rateHz: RATE_HZ,
    leadInS: plan.sweep.lead_in_s,
    leadOutS: plan.sweep.lead_out_s,
    gainDb: -40,
  });
  const random = createRandom("bench");
  const latency = Math.round(0.3 * RATE_HZ);
  const samples = Float64Array.from(
    { length: LENGTH_S * RATE_HZ },
    (_, n) => (stimulus[n - latency] ?? 0) + 1e-5 * random.normal(),
  );
  return writeWav([samples], RATE_HZ, "pcm24");
}

async function checkOnce(): Promise<number> {
  const place = toPlannedRuns(plan, "bench").find(({ slot }) => slot === "short-76") ?? null;
  const start = performance.now();
  const report = await checkArrival({
    run: { file: "76.wav", digest: "76", channel: 1, place },
    plan,
    limits: labSettingsSchema.parse({}).arrival,
    engineVersion: "bench",
    siblings: [],
    open: () => toByteSource(bytes),
  });
  const tookMs = performance.now() - start;
  const fault = report.checks.find(({ verdict }) => verdict !== "pass");
  if (fault !== undefined) throw new Error(`the recording of the bench fails: ${fault.finding}`);
  return tookMs;
}

export const benches: Bench[] = [
  {
    key: "arrival.check_15s_ms",
    name: "arrival checks of a recording of 15 s at 48 kHz",
    unit: "ms",
    runs: 9,
    before: () => {
      bytes = recordRun();
      return Promise.resolve();
    },
    run: checkOnce,
  },
];
