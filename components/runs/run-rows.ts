/** The recordings of a series as the table shows them: one row per planned run, in capture order. */
import type { RunView, SlotView } from "@/lib/api/runs";
import type { PlannedRun } from "@/lib/series/planned-runs";
import type { UploadItem } from "./upload-item";

export interface RunRow {
  planned: PlannedRun;
  slot: SlotView;
  /** The take that counts; null while there is none. */
  run: RunView | null;
  /** Excluded and replaced takes, newest first. */
  earlier: RunView[];
  /** A file on its way to this place. */
  upload: UploadItem | null;
}

export interface RunGroup {
  title: string;
  rows: RunRow[];
}

export interface RunTable {
  groups: RunGroup[];
  /** Recordings that fit no planned run. */
  unassigned: RunView[];
  /** Files on their way for which no place is known yet. */
  loose: UploadItem[];
}

interface RunTableInput {
  planned: readonly PlannedRun[];
  runs: readonly RunView[];
  slots: readonly SlotView[];
  uploads: readonly UploadItem[];
}

const BEFORE = new Set<PlannedRun["role"]>(["calibrator-before", "ambient"]);
const AFTER = new Set<PlannedRun["role"]>(["closing", "calibrator-after"]);
const PUT_ASIDE = new Set<RunView["state"]>(["excluded", "replaced"]);

export function toRunTable({ planned, runs, slots, uploads }: RunTableInput): RunTable {
  const places = new Set(planned.map((p) => p.slot));
  const rows = planned.map((p): RunRow => {
    const takes = runs.filter((run) => run.slot === p.slot).sort((a, b) => b.take - a.take);
    return {
      planned: p,
      slot: slots.find((s) => s.slot === p.slot) ?? closedSlot(p.slot),
      run: takes.find((run) => !PUT_ASIDE.has(run.state)) ?? null,
      earlier: takes.filter((run) => PUT_ASIDE.has(run.state)),
      upload: uploads.find((upload) => upload.slot === p.slot) ?? null,
    };
  });
  const groups = [
    { title: "Before", rows: rows.filter((row) => BEFORE.has(row.planned.role)) },
    {
      title: "The ladder, upwards: a level opens when the one below has passed",
      rows: rows.filter((row) => !BEFORE.has(row.planned.role) && !AFTER.has(row.planned.role)),
    },
    { title: "After", rows: rows.filter((row) => AFTER.has(row.planned.role)) },
  ];
  return {
    groups: groups.filter((group) => group.rows.length > 0),
    unassigned: runs.filter((run) => run.slot === null && run.state !== "replaced"),
    loose: uploads.filter((upload) => upload.slot === null || !places.has(upload.slot)),
  };
}

const closedSlot = (slot: string): SlotView => ({
  slot,
  open: false,
  lock_reason: null,
  excused: null,
});

/** Level and kind apart, as the first column sets them: "76 dB" and "short-term". */
export function toRunName(planned: PlannedRun, calibrator: string): { name: string; kind: string } {
  const level = planned.levelDb === null ? "" : `${toLevel(planned.levelDb)}\u00a0dB`;
  switch (planned.role) {
    case "calibrator-before":
      return { name: "calibrator", kind: calibrator };
    case "calibrator-after":
      return { name: "calibrator", kind: `${calibrator}, again` };
    case "ambient":
      return { name: "room noise", kind: "nothing playing" };
    case "closing":
      return { name: level, kind: "closing repeat" };
    case "long-term":
      return { name: level, kind: "long-term" };
    case "variant":
      return { name: level, kind: planned.variant ?? "variant" };
    case "short-term":
      return {
        name: level,
        kind: planned.repeat === 1 ? "short-term" : `short-term, repeat ${planned.repeat - 1}`,
      };
  }
}

const toLevel = (levelDb: number): string => String(Math.round(levelDb * 100) / 100);
