/** What the front of the engine has to say about a run, in the tester's words. */
import type { Warning } from "../result/result-schema";
import type { SweepInUse } from "./deconvolution";
import { toDriftUncertaintyPpm } from "./drift";
import type { RawRun } from "./measure-run";

const LEAST_SNR_DB = 20;
const DRIFT_PPM = 50;
const MISSING_S = 0.01;

/** Defaults of docs/domain.md section 9; none of them stops an analysis. */
export function toRunWarnings(raw: RawRun, file: string, sweep: SweepInUse): Warning[] {
  const warnings: Warning[] = [];
  const warn = (code: string, message: string): number => warnings.push({ code, message, file });
  if (raw.clipped)
    warn(
      "run.clipped",
      `${file} reaches digital full scale: its distortion and its compression are not the loudspeaker's.`,
    );
  if (raw.snrDb < LEAST_SNR_DB)
    warn(
      "run.low-signal",
      `${file} is only ${raw.snrDb.toFixed(1)} dB over the noise in the reference band; ${LEAST_SNR_DB} dB are wanted.`,
    );
  if (raw.missing > MISSING_S * sweep.rateHz) {
    warn(
      "run.sweep-cut",
      `${file} lacks ${(raw.missing / sweep.rateHz).toFixed(3)} s of the sweep at its ${raw.latencyS < 0 ? "start" : "end"}.`,
    );
  }
  if (Math.abs(raw.driftPpm) > Math.max(DRIFT_PPM, toDriftUncertaintyPpm(sweep.rateConstantS))) {
    warn(
      "run.clock-drift",
      `${file}: player and recorder differ by about ${raw.driftPpm.toFixed(0)} ppm. Magnitudes hold; frequencies are off by as much.`,
    );
  }
  return warnings;
}
