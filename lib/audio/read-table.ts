/** Tables of frequency and level: microphone files, and runs that were reduced elsewhere. */
import { FileError } from "../errors/app-error";
import { listColumns, type ColumnChoice, type HarmonicUnit } from "../series/table-columns";
import { readTableRows } from "./table-rows";

/** Which column holds what, counted from 0. */
export interface TableColumns {
  frequency: number;
  level: number;
  phase?: number | undefined;
  thd?: number | undefined;
  harmonics: { order: number; column: number; unit: HarmonicUnit }[];
  /** Frequencies stand in kHz. */
  kilohertz?: boolean;
}

export interface FrequencyTable {
  /** [points] ascending, Hz. */
  frequencyHz: number[];
  /** [points] dB. */
  levelDb: number[];
  /** [points] where there is such a column. */
  phaseDeg?: number[];
  thdPercent?: number[];
  /** Orders 2 to 9 that the table holds, values in their own unit. */
  harmonics: { order: number; unit: HarmonicUnit; values: number[] }[];
  /** Head and columns as they were recognised, for a preview. */
  head: string[];
  columns: TableColumns;
}

/**
 * @param byHand columns chosen by a person, in place of those that the head tells.
 * @throws FileError "table.not-readable", "table.column-missing", "table.too-large"
 */
export function readTable(bytes: Uint8Array, file: string, byHand?: ColumnChoice): FrequencyTable {
  const { head, rows } = readTableRows(bytes, file);
  const width = Math.max(0, ...rows.map((row) => row.length));
  if (rows.length === 0 || width < 2) {
    throw new FileError("table.not-readable", `${file} holds no rows of frequency and level.`, {
      file,
    });
  }
  const columns =
    byHand === undefined ? recogniseColumns(head, width, file) : takeChoice(byHand, width, file);
  const points = rows
    .filter((row) => row[columns.frequency]! > 0 && Number.isFinite(row[columns.level]))
    .sort((a, b) => a[columns.frequency]! - b[columns.frequency]!);
  requirePoints(points, columns, file);
  const column = (index: number): number[] => points.map((row) => row[index] ?? Number.NaN);
  const factor = columns.kilohertz === true ? 1000 : 1;
  return {
    frequencyHz: column(columns.frequency).map((f) => f * factor),
    levelDb: column(columns.level),
    ...(columns.phase === undefined ? {} : { phaseDeg: column(columns.phase) }),
    ...(columns.thd === undefined ? {} : { thdPercent: column(columns.thd) }),
    harmonics: columns.harmonics.map(({ order, unit, column: index }) => ({
      order,
      unit,
      values: column(index),
    })),
    head,
    columns,
  };
}

/** From 1, as people count, to 0. */
function takeChoice(choice: ColumnChoice, width: number, file: string): TableColumns {
  const beyond = listColumns(choice).find((column) => column > width);
  if (beyond !== undefined) {
    throw new FileError(
      "table.column-missing",
      `${file} has ${width} columns; column ${beyond} was asked for. Map the columns again.`,
      { file, details: { columns: width, column: beyond } },
    );
  }
  const { frequency, level, phase, thd, harmonics, kilohertz } = choice;
  return {
    frequency: frequency - 1,
    level: level - 1,
    ...(phase === undefined ? {} : { phase: phase - 1 }),
    ...(thd === undefined ? {} : { thd: thd - 1 }),
    harmonics: harmonics.map(({ column, ...rest }) => ({ ...rest, column: column - 1 })),
    kilohertz,
  };
}

function requirePoints(
  points: readonly number[][],
  { frequency }: TableColumns,
  file: string,
): void {
  if (points.length < 2) {
    throw new FileError(
      "table.not-readable",
      `${file} holds ${points.length === 1 ? "one row" : "no row"} with a frequency over 0 Hz and a level; two are needed.`,
      { file },
    );
  }
  const twice = points.findIndex((row, i) => i > 0 && row[frequency] === points[i - 1]![frequency]);
  if (twice >= 0) {
    throw new FileError(
      "table.not-readable",
      `${file} holds ${points[twice]![frequency]} Hz twice. One row per frequency is read.`,
      { file },
    );
  }
}

const FREQUENCY = /freq|^f\b|\bk?hz\b/;
const PHASE = /phase|deg|°|winkel/;
const THD = /\bthd\b|total harmonic/;
const ORDER = /(?:^|\b)(?:h|hd|k|d)\s?([2-9])\b|\b([2-9])(?:nd|rd|th)\b|harmonic\s?([2-9])/;
const LEVEL = /spl|level|magn|ampl|\bdb|respon|sens|gain|pegel|fundamental|\bh1\b/;

/** What the head tells, counted from 0. @throws FileError "table.column-missing" */
export function recogniseColumns(
  head: readonly string[],
  width: number,
  file: string,
): TableColumns {
  if (head.length === 0)
    return { frequency: 0, level: 1, ...(width > 2 ? { phase: 2 } : {}), harmonics: [] };
  const kinds = head.map(toKind);
  const find = (kind: string): number => kinds.findIndex((k) => k === kind);
  const [frequency, level, phase, thd] = ["frequency", "level", "phase", "thd"].map(find) as [
    number,
    number,
    number,
    number,
  ];
  if (frequency < 0 || level < 0) {
    throw new FileError(
      "table.column-missing",
      `${file}: no column for ${frequency < 0 ? "the frequency" : "the level"} among "${head.join('", "')}". Map the columns by hand.`,
      {
        file,
        details: { head },
      },
    );
  }
  return {
    frequency,
    level,
    ...(phase < 0 ? {} : { phase }),
    ...(thd < 0 ? {} : { thd }),
    harmonics: kinds.flatMap((kind, column) =>
      typeof kind === "number" ? [{ order: kind, column, unit: toUnit(head[column] ?? "") }] : [],
    ),
    kilohertz: /\bkhz\b/.test(head[frequency] ?? ""),
  };
}

function toKind(name: string): "frequency" | "level" | "phase" | "thd" | number | null {
  const order = ORDER.exec(name);
  if (order !== null) return Number(order[1] ?? order[2] ?? order[3]);
  // THD in decibels is left to a person: the column is read as percent.
  if (THD.test(name)) return /\bdb/.test(name) ? null : "thd";
  if (PHASE.test(name)) return "phase";
  if (FREQUENCY.test(name)) return "frequency";
  return LEVEL.test(name) ? "level" : null;
}

function toUnit(name: string): HarmonicUnit {
  if (/%|percent/.test(name)) return "percent";
  return /\bre\b|rel|dbc|fund/.test(name) ? "dB re fundamental" : "dB SPL";
}
