"use client";

import { levelRamp, type LevelPaint } from "@/lib/charts/tokens";
import { TableFrame } from "../parts/table";
import { COLUMNS } from "./run-cells";
import type { RunActs } from "./run-acts";
import type { RunTable } from "./run-rows";
import { RunRows } from "./run-row";

interface RunsTableProps {
  table: RunTable;
  /** "94 dB, 1 kHz" */
  calibrator: string;
  mayCapture: boolean;
  acts: RunActs;
}

const HEAD =
  "figures border-b border-ink px-[9px] pt-[9px] pb-2 align-bottom text-label font-medium text-ink-2 first:pl-4 last:pr-4";

/** Before, the ladder, after: every planned run with its file, figures and verdict. */
export function RunsTable({ table, calibrator, mayCapture, acts }: RunsTableProps) {
  const paints = toPaints(table);
  return (
    <TableFrame label="Planned runs and their recordings">
      <table className="w-full border-collapse border border-rule bg-sheet text-left max-md:block max-md:border-x-0">
        <caption className="sr-only">Planned runs and their recordings</caption>
        <thead className="max-md:sr-only">
          <tr>
            <th scope="col" className={HEAD}>
              Planned
            </th>
            <th scope="col" className={HEAD}>
              File, matched by name
            </th>
            <th scope="col" className={HEAD}>
              Received
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Length
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Input peak,
              <br />
              dBFS
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Measured
              <br />
              level, dB
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Signal-
              <br />
              to-noise
            </th>
            <th scope="col" className={HEAD}>
              Verdict
            </th>
            <th scope="col" className={HEAD}>
              <span className="sr-only">Acts</span>
            </th>
          </tr>
        </thead>
        {table.groups.map((group) => (
          <tbody key={group.title} className="max-md:block">
            <tr className="max-md:block">
              <th
                scope="rowgroup"
                colSpan={COLUMNS}
                className="figures border-t border-rule bg-page px-4 pt-[7px] pb-[5px] text-label font-medium text-ink-2 max-md:block max-md:px-phone"
              >
                {group.title}
              </th>
            </tr>
            {group.rows.map((row) => (
              <RunRows
                key={row.planned.slot}
                row={row}
                paint={row.planned.levelDb === null ? undefined : paints.get(row.planned.levelDb)}
                calibrator={calibrator}
                mayCapture={mayCapture}
                acts={acts}
              />
            ))}
          </tbody>
        ))}
      </table>
    </TableFrame>
  );
}

function toPaints(table: RunTable): Map<number, LevelPaint> {
  const rows = table.groups.flatMap((group) => group.rows);
  const levels = [
    ...new Set(rows.flatMap(({ planned }) => (planned.levelDb === null ? [] : [planned.levelDb]))),
  ].sort((a, b) => a - b);
  const ramp = levelRamp(levels.length);
  return new Map(
    levels.flatMap((level, at) => {
      const paint = ramp[at];
      return paint === undefined ? [] : [[level, paint] as const];
    }),
  );
}
