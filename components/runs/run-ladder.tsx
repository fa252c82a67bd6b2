import { RUNS_LADDER, toLadderFigure, type LadderStep } from "@/lib/charts/ladder";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { Shapes } from "../parts/shapes";
import { TableFrame } from "../parts/table";
import type { RunRow } from "./run-rows";
import { toRowVerdict } from "./verdict-words";

/** How far the series has come, as steps of water. */
export function RunLadder({ rows }: { rows: readonly RunRow[] }) {
  const figure = toLadderFigure(rows.map(toStep), RUNS_LADDER);
  return (
    <TableFrame label="How far the series has come" className="max-w-full">
      <svg
        width={figure.width}
        height={figure.height}
        viewBox={`0 0 ${figure.width} ${figure.height}`}
        role="img"
        aria-label={toLadderSentence(rows)}
      >
        <Shapes shapes={figure.shapes} />
      </svg>
    </TableFrame>
  );
}

/** "5 of 11 recordings are in, 91 dB short-term failed, 3 are locked" */
export function toLadderSentence(rows: readonly RunRow[]): string {
  const inside = rows.filter((row) => row.run !== null && row.run.state !== "failed").length;
  const failed = rows.filter((row) => row.run?.state === "failed");
  const locked = rows.filter((row) => row.run === null && !row.slot.open).length;
  const parts = [`${inside} of ${rows.length} recordings are in`];
  for (const row of failed) parts.push(`${row.planned.label} failed`);
  if (locked > 0) parts.push(locked === 1 ? "one is locked" : `${locked} are locked`);
  return parts.join(", ");
}

function toStep(row: RunRow): LadderStep {
  const { planned } = row;
  const here = row.run !== null || row.slot.excused !== null;
  const verdict = toRowVerdict(row);
  return {
    levelDb: planned.levelDb,
    longTerm: planned.role === "long-term",
    state: here ? "in" : row.slot.open ? "due" : "locked",
    mark:
      verdict.kind === "bad" || verdict.kind === "locked" || verdict.kind === "going"
        ? verdict.kind
        : here
          ? "ok"
          : null,
    label: toStepLabel(row),
    note: null,
  };
}

function toStepLabel({ planned }: RunRow): string[] {
  const level = planned.levelDb === null ? "" : `${formatPlain(planned.levelDb)}${NBSP}dB`;
  switch (planned.role) {
    case "calibrator-before":
    case "calibrator-after":
      return ["cal."];
    case "ambient":
      return ["room"];
    case "long-term":
      return [level, "long"];
    case "closing":
      return [level, "closing"];
    case "variant":
      return [level, "variant"];
    case "short-term":
      return planned.repeat === 1 ? [level] : [level, `repeat ${planned.repeat - 1}`];
  }
}
