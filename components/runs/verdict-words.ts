/** What the verdict column says of a recording, and which checks open a row below. */
import type { VerdictKind } from "@/components/parts/verdict";
import type { RunView } from "@/lib/api/runs";
import { formatCount, formatNumber, formatPlain, NBSP } from "@/lib/charts/format";
import type { ArrivalCheck } from "@/lib/runs/arrival-schema";
import type { RunRow } from "./run-rows";
import { toUploadWords, type UploadItem } from "./upload-item";

export interface VerdictWords {
  kind: VerdictKind;
  words: string;
  /** A second line in figures; null where there is none. */
  note: string | null;
}

/** The row's verdict: the recording's where there is one, else what stands in its way. */
export function toRowVerdict(row: RunRow): VerdictWords {
  const { upload, slot } = row;
  if (upload !== null && upload.state !== "done") return toUploadVerdict(upload);
  if (row.run !== null) return toRunVerdict(row.run);
  if (slot.excused !== null) {
    return { kind: "ok", words: "excused", note: `“${slot.excused}”` };
  }
  if (!slot.open)
    return { kind: "locked", words: slot.lock_reason ?? "not open yet", note: toAskedNote(row) };
  return { kind: "wait", words: toDueWords(row), note: toAskedNote(row) };
}

/** Why a run stands here that the plan did not have. */
function toAskedNote({ planned: { asked } }: RunRow): string | null {
  return asked === undefined ? null : `asked for by ${asked.by}: “${asked.reason}”`;
}

/** A file on its way, or refused with the server's reason. */
export function toUploadVerdict(upload: UploadItem): VerdictWords {
  const words = toUploadWords(upload);
  if (upload.state === "failed") return { kind: "bad", words: "refused", note: words };
  return { kind: upload.state === "waiting" ? "wait" : "going", words, note: null };
}

/** What is held against what, where the first recording is still to come. */
function toDueWords(row: RunRow): string {
  if (row.planned.role === "closing") return `due: within 0.2${NBSP}dB of the first`;
  if (row.planned.role === "calibrator-after") return `due: within 0.5${NBSP}dB of the first`;
  return "due now";
}

export function toRunVerdict(run: RunView): VerdictWords {
  const failed = findCheck(run, "fail");
  const warned = findCheck(run, "warn");
  switch (run.state) {
    case "checking":
      return { kind: "going", words: "being checked", note: null };
    case "passed":
      return { kind: "ok", words: "matches plan", note: null };
    case "warned":
      return {
        kind: "warned",
        words: "passed, with a warning",
        note: warned === null ? null : (toFigureNote(warned) ?? warned.title),
      };
    case "failed":
      return {
        kind: "bad",
        words: failed?.title ?? "failed",
        note: failed === null ? null : toFigureNote(failed),
      };
    case "kept":
      return {
        kind: "ok",
        words: failed === null ? "kept" : `${failed.title}, kept`,
        note:
          run.reason_by === null
            ? "with a reason"
            : `reason by ${toInitialName(run.reason_by.name)}`,
      };
    case "excluded":
      return {
        kind: "locked",
        words: "excluded",
        note:
          run.reason_by === null
            ? "with a reason"
            : `reason by ${toInitialName(run.reason_by.name)}`,
      };
    case "replaced":
      return { kind: "locked", words: "replaced by a later take", note: null };
  }
}

/** Failures first, then warnings, each in the order in which they were checked. */
export function toSpeakingChecks(run: RunView): ArrivalCheck[] {
  const checks = run.report?.checks ?? [];
  return [
    ...checks.filter((c) => c.verdict === "fail"),
    ...checks.filter((c) => c.verdict === "warn"),
  ];
}

function findCheck(run: RunView, verdict: ArrivalCheck["verdict"]): ArrivalCheck | null {
  return run.report?.checks.find((check) => check.verdict === verdict) ?? null;
}

/** "1 214 samples", "step 0.31 dB of 0.20 dB allowed". */
function toFigureNote(check: ArrivalCheck): string | null {
  if (check.figure === null) return null;
  const { value, limit, unit } = check.figure;
  if (unit === "samples") return `${formatCount(value)}${NBSP}${unit}`;
  const text = `${formatPlain(value)}${unit === "" ? "" : `${NBSP}${unit}`}`;
  if (limit === null) return text;
  return `${text}, limit ${formatPlain(limit)}${unit === "" ? "" : `${NBSP}${unit}`}`;
}

/** "Ines Varley" is "I. Varley" where room is short. */
export function toInitialName(name: string): string {
  const parts = name.trim().split(/\s+/);
  const last = parts.at(-1) ?? "";
  if (parts.length < 2) return last;
  return `${Array.from(parts[0] ?? "")[0] ?? ""}. ${last}`;
}

/** Columns in figures; null where there is no value yet. */
export interface RunFigures {
  length: string | null;
  peak: string | null;
  level: string | null;
  snr: string | null;
  /** Columns that a failed check speaks of. */
  faulty: ReadonlySet<"length" | "peak" | "level" | "snr">;
}

const FAULTY_COLUMN: Partial<Record<ArrivalCheck["code"], "length" | "peak" | "level" | "snr">> = {
  clipping: "peak",
  silence: "peak",
  "sweep-complete": "length",
  "dropped-samples": "length",
  "level-step": "level",
  "level-plan": "level",
  "closing-repeat": "level",
  "calibrator-agreement": "level",
  "signal-to-noise": "snr",
};

export function toRunFigures(run: RunView | null): RunFigures {
  const report = run?.report ?? null;
  const faulty = new Set<"length" | "peak" | "level" | "snr">();
  for (const check of report?.checks ?? []) {
    const column = FAULTY_COLUMN[check.code];
    if (check.verdict === "fail" && column !== undefined) faulty.add(column);
  }
  if (report === null) return { length: null, peak: null, level: null, snr: null, faulty };
  return {
    // A table has no length in time.
    length: report.length_s === 0 ? null : `${formatNumber(report.length_s, 2)}${NBSP}s`,
    peak: report.peak_dBFS === null ? null : formatNumber(report.peak_dBFS),
    level: report.measured_level_dB === null ? null : formatNumber(report.measured_level_dB),
    snr: report.snr_dB === null ? null : `${formatNumber(report.snr_dB, 0)}${NBSP}dB`,
    faulty,
  };
}
