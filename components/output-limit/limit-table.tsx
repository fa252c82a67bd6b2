import type { BandColumn, BandColumns } from "@/lib/charts/band-columns";
import { sayCause, sayLimit, sayOnset } from "@/lib/charts/band-words";
import type { MapRow } from "@/lib/charts/compression-map";
import { formatFrequency, formatLevel, formatNumber } from "@/lib/charts/format";
import type { FigureFile } from "../parts/figure-file";
import { ValuesTable } from "../parts/values-table";

interface LimitTableProps {
  columns: BandColumns;
  rows: readonly MapRow[];
  withDecisions: boolean;
  /** The wall and the map, to be saved. */
  file: FigureFile;
}

const DECISIONS = { open: "open", confirmed: "confirmed", changed: "changed" } as const;

/** All numbers of the wall and the map: one row per band. */
export function LimitTable({
  columns: { columns, levels, spl },
  rows,
  withDecisions,
  file,
}: LimitTableProps) {
  const unit = spl ? "dB SPL" : "dB, run level";
  return (
    <ValuesTable
      caption="Output limit and compression by band"
      file={file}
      columns={[
        { key: "band", head: "band" },
        { key: "limit", head: `limit, ${unit}`, words: true },
        { key: "onset", head: `onset, ${unit}`, words: true },
        { key: "cause", head: "cause", words: true },
        ...(withDecisions ? [{ key: "decision", head: "decision", words: true }] : []),
        ...levels.map((level) => ({
          key: `m${level.levelDb}`,
          head: `${formatLevel(level.levelDb)} run, ${unit}`,
        })),
        ...rows.map((row) => ({ key: row.label, head: `${row.label}, compression dB` })),
      ]}
      rows={columns.map((column, at) => ({
        id: column.nominalHz,
        cells: {
          band: formatFrequency(column.nominalHz),
          limit: sayLimit(column, levels).replace(/^limit /, ""),
          onset: sayOnset(column, levels).replace(/^onset /, ""),
          cause: sayCause(column),
          decision: DECISIONS[column.decision],
          ...toMeasuredCells(column, levels),
          ...Object.fromEntries(
            rows.map((row) => [row.label, row.cells[at]?.text ?? "in the noise"]),
          ),
        },
      }))}
    />
  );
}

const toMeasuredCells = (
  column: BandColumn,
  levels: BandColumns["levels"],
): Record<string, string> =>
  Object.fromEntries(
    levels.map((level) => {
      const measured = column.measuredDb[level.rank];
      return [
        `m${level.levelDb}`,
        measured === null || measured === undefined ? "in the noise" : formatNumber(measured),
      ];
    }),
  );
