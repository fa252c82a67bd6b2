/** Makes recordings of demo series as its parent asks for them, and ends with it. */
import { writeFileSync } from "node:fs";
import { recordSeries, type DemoRecording } from "../demo/record-series";
import type { RecordingAnswer, RecordingJob } from "../demo/recorders";

/** By name of the series: what its loudspeaker is like need not be found out twice. */
const known = new Map<string, DemoRecording[]>();

function record({ series, slot, path }: RecordingJob): void {
  const recordings = known.get(series.name) ?? recordSeries(series);
  known.set(series.name, recordings);
  const recording = recordings.find(({ run }) => run.slot === slot);
  if (recording === undefined) throw new Error("its plan has no such recording");
  writeFileSync(path, recording.makeWav());
}

process.on("message", (job: RecordingJob) => {
  const answer: RecordingAnswer = { error: null };
  try {
    record(job);
  } catch (error) {
    answer.error = error instanceof Error ? error.message : String(error);
  }
  // A parent that is gone meanwhile wants no answer.
  process.send?.(answer, () => undefined);
});
process.on("disconnect", () => process.exit(0));
