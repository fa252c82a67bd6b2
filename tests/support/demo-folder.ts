/** A demo series as a folder of the analysis command: series.json parsed, files in memory. */
import { toSweepTiming } from "../../lib/analysis/sweep";
import { seriesSchema, type Series } from "../../lib/series/series-schema";
import type { DemoSeries } from "../../scripts/demo/demo-labs";
import { recordSeries } from "../../scripts/demo/record-series";

export interface DemoFolder {
  series: Series;
  files: Map<string, Uint8Array>;
}

/** Plays and records the whole series. */
export function composeDemoFolder(demo: DemoSeries): DemoFolder {
  const { plan, loudspeaker } = demo;
  const files = new Map<string, Uint8Array>();
  const recordings = recordSeries(demo);
  for (const { run, makeWav } of recordings) files.set(run.fileName, makeWav());
  const fileOf = (role: string): string | undefined =>
    recordings.find(({ run }) => run.role === role)?.run.fileName;
  const { start_Hz, stop_Hz, rate_Hz, length_s, lead_in_s, lead_out_s } = plan.sweep;
  const timing = toSweepTiming({ startHz: start_Hz, stopHz: stop_Hz, lengthS: length_s });
  const series = seriesSchema.parse({
    loudspeaker: loudspeaker.model,
    environment: plan.place.environment,
    distance_m: plan.place.distance_m,
    ...(loudspeaker.tuning_Hz === null ? {} : { tuning_Hz: loudspeaker.tuning_Hz }),
    stimulus: { start_Hz, stop_Hz, rate_Hz, length_s: timing.lengthS, lead_in_s, lead_out_s },
    calibration: {
      file: fileOf("calibrator-before"),
      after_file: fileOf("calibrator-after"),
      level_dB: plan.calibration.level_dB,
      frequency_Hz: plan.calibration.frequency_Hz,
    },
    ambient: { file: fileOf("ambient") },
    runs: recordings
      .filter(({ run }) => ["short-term", "long-term", "closing"].includes(run.role))
      .map(({ run }) => ({
        file: run.fileName,
        level_dB: run.levelDb,
        kind: run.role,
        ...(run.role === "long-term" ? { conditioning: plan.conditioning } : {}),
      })),
  });
  return { series, files };
}
