/** Why an analysis could not be done, in the tester's words, with what to do next. */
import { AppError } from "../errors/app-error";
import { ERROR_TABLE, type ErrorCode } from "../errors/error-table";
import type { Failure } from "../api/series";

/** What helps against a code, beyond what its message says already; the rest is ours to look at. */
const REMEDIES: Partial<Record<ErrorCode, string>> = {
  "run.no-sweep":
    "Listen to the recording: record this run again at the same gain, or excuse it with a reason.",
  "run.silent": "Check microphone and channel, and record this run again at the same gain.",
  "run.too-short": "Record this run again at the same gain and let the recorder run to the end.",
  "stimulus.rate":
    "Set the recorder to that rate and repeat the run at the same gain; do not convert the file.",
  "stimulus.invalid": "Check start, end and length of the sweep in the plan.",
  "calibration.missing": "Record the calibrator at the same input gain.",
  "calibration.not-a-tone": "Leave the input gain as it is, and let nothing else play meanwhile.",
  "series.too-few-runs": "Record another level, or keep a failed take with a reason.",
  "series.reference-missing": "Record the lowest level as a short-term run.",
  "analysis.nothing-valid":
    "Check that the recordings belong to this stimulus and that the room is quiet enough.",
  "microphone.not-readable":
    "Give the microphone file as a table of frequency in Hz and level in dB.",
  "audio.channel-missing": "Choose a channel that the file has.",
  "storage.missing": "Restore the recording from a backup, or record the run again.",
};
const OURS =
  "Nothing of yours is lost. Try again; if it fails again, tell the admin of your lab the report number.";
const FILE_REMEDY = "Export the recording again and replace the file.";

export interface FailurePlace {
  analysisId: string;
  version: number;
  attempt: number;
  at: Date;
  /** Slot by the name of its file. */
  slotByFile: ReadonlyMap<string, string>;
}

/** An unknown error says nothing of its inside; the log has it under the same report number. */
export function toFailure(error: unknown, place: FailurePlace): Failure {
  const known = error instanceof AppError && error.code !== "internal" ? error : null;
  const code = known?.code ?? "internal";
  const file = known?.file ?? null;
  return {
    code,
    message:
      known?.message ??
      "The analysis stopped because of a fault on our side, not of your recordings.",
    slot: file === null ? null : (place.slotByFile.get(file) ?? null),
    file,
    remedy: REMEDIES[code] ?? (/^audio\.|^table\./.test(code) ? FILE_REMEDY : OURS),
    report: toReportNumber(place),
    at: place.at.toISOString(),
  };
}

/** Short enough to be read out: "7F3A-2.1" is the first try of version 2. */
export function toReportNumber(place: Pick<FailurePlace, "analysisId" | "version" | "attempt">) {
  return `${place.analysisId.slice(0, 4).toUpperCase()}-${place.version}.${place.attempt}`;
}

/** Whether the same work may succeed later. What nobody explained may. */
export function mayRetry(error: unknown): boolean {
  return !(error instanceof AppError) || ERROR_TABLE[error.code].retryable;
}
