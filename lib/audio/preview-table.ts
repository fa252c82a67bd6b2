/** A look into a table before it is sent: head, first rows, and what each column is taken for. */
import { FileError } from "../errors/app-error";
import type { ColumnChoice } from "../series/table-columns";
import { recogniseColumns } from "./read-table";
import { readTableRows } from "./table-rows";

export interface TablePreview {
  /** One name per column; empty where the file has no head. */
  head: string[];
  columns: number;
  /** Of the whole table. */
  rows: number;
  /** [rows][columns] the first ones; null where a cell holds no number. */
  first: (number | null)[][];
  /** What the head tells, counted from 1; null where it does not tell enough. */
  recognised: ColumnChoice | null;
}

const SHOWN_ROWS = 6;

/** @throws FileError "table.not-readable", "table.too-large" */
export function previewTable(bytes: Uint8Array, file: string): TablePreview {
  const { head, rows } = readTableRows(bytes, file);
  const columns = Math.max(0, ...rows.map((row) => row.length));
  if (columns < 2) {
    throw new FileError("table.not-readable", `${file} holds no rows of frequency and level.`, {
      file,
    });
  }
  return {
    head,
    columns,
    rows: rows.length,
    first: rows.slice(0, SHOWN_ROWS).map((row) =>
      Array.from({ length: columns }, (_, c) => {
        const value = row[c];
        return value === undefined || Number.isNaN(value) ? null : value;
      }),
    ),
    recognised: recognise(head, columns, file),
  };
}

function recognise(head: string[], columns: number, file: string): ColumnChoice | null {
  try {
    const { frequency, level, phase, thd, harmonics, kilohertz } = recogniseColumns(
      head,
      columns,
      file,
    );
    return {
      frequency: frequency + 1,
      level: level + 1,
      ...(phase === undefined ? {} : { phase: phase + 1 }),
      ...(thd === undefined ? {} : { thd: thd + 1 }),
      harmonics: harmonics.map(({ column, ...rest }) => ({ ...rest, column: column + 1 })),
      kilohertz: kilohertz === true,
    };
  } catch (error) {
    if (error instanceof FileError && error.code === "table.column-missing") return null;
    throw error;
  }
}
