/** A figure's table as CSV, with what must go with its levels. */
import type { ReactNode } from "react";
import { toCsvLine } from "@/lib/kit/csv";
import type { ValuesColumn, ValuesRow } from "./values-grid";

/**
 * @param comments lines before the table, each after "# ".
 * @returns lines ended by CRLF; figures with a plain minus, nothing where a cell holds no text.
 */
export const toTableCsv = (
  columns: readonly ValuesColumn[],
  rows: readonly ValuesRow[],
  comments: readonly string[],
): string =>
  [
    ...comments.map((line) => `# ${toPlain(line)}`),
    toCsvLine(columns.map((column) => toPlain(column.head))),
    ...rows.map((row) => toCsvLine(columns.map((column) => toCell(row.cells[column.key])))),
    "",
  ].join("\r\n");

const toPlain = (text: string): string => text.replaceAll(/[\u00a0\u2009]/g, " ");

function toCell(cell: ReactNode): string {
  if (typeof cell === "number") return String(cell);
  return typeof cell === "string" ? toPlain(cell).replaceAll("\u2212", "-") : "";
}
