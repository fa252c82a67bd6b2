/** Rows of numbers and the head above them, out of a text file of unknown habits. */
import { FileError } from "../errors/app-error";

export interface TableRows {
  /** Head cells, lower case; empty where there was none that fits. */
  head: string[];
  /** [rows][columns]; NaN where a cell holds no number. */
  rows: number[][];
}

export const LARGEST_TABLE_BYTES = 16 * 2 ** 20;
const COMMENT = /^\s*(?:[*;#!%]|\/\/)+\s?/;
const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?$/i;

/** More than the cells of 200 lines: lines weigh before cells. */
const MOST_CELLS = 1e6;

type Split = (line: string) => string[];
interface Dialect {
  split: Split;
  decimalComma: boolean;
}

/**
 * Comments, blank lines, any of tab, semicolon, comma and blanks between cells, decimal commas, a
 * byte-order mark, UTF-8, UTF-16 and Latin-1.
 * @throws FileError "table.too-large", "table.not-readable"
 */
export function readTableRows(bytes: Uint8Array, file: string): TableRows {
  if (bytes.length > LARGEST_TABLE_BYTES) throw toTooLarge(bytes.length, file);
  const text = decode(bytes);
  if (text.includes("\0"))
    throw new FileError("table.not-readable", `${file} is no text: it holds zero bytes.`, { file });
  const lines = text.split(/\r\n|\r|\n/);
  const dialect = toDialect(lines);
  const rows: number[][] = [];
  let head: string[] = [];
  for (const line of lines) {
    const cells = COMMENT.test(line) ? null : toNumbers(line, dialect);
    if (cells !== null && cells.length > 0 && !Number.isNaN(cells[0]!)) rows.push(cells);
    else if (rows.length === 0 && line.trim() !== "") head = keepBetterHead(head, line, dialect);
  }
  const columns = Math.max(0, ...rows.slice(0, 50).map((row) => row.length));
  return { head: head.length === columns ? head : [], rows };
}

export const toTooLarge = (bytes: number, file: string): FileError =>
  new FileError(
    "table.too-large",
    `${file} holds ${bytes} bytes; tables up to ${LARGEST_TABLE_BYTES} are read.`,
    { file },
  );

function decode(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder("utf-16le").decode(bytes);
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder("utf-16be").decode(bytes);
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    return new TextDecoder("windows-1252").decode(bytes);
  }
}

const byMark =
  (mark: string): Split =>
  (line) =>
    line.split(mark).map(unquote);
const byBlanks: Split = (line) => line.trim().split(/\s+/).map(unquote);
const unquote = (cell: string): string =>
  cell
    .trim()
    .replace(/^"(.*)"$/, "$1")
    .trim();

const DIALECTS: Dialect[] = [
  ...["\t", ";"].flatMap((mark) =>
    [false, true].map((decimalComma) => ({ split: byMark(mark), decimalComma })),
  ),
  { split: byBlanks, decimalComma: false },
  { split: byBlanks, decimalComma: true },
  { split: byMark(","), decimalComma: false },
];

/** The way of reading under which most lines are rows of two numbers or more, and most cells numbers. */
function toDialect(lines: readonly string[]): Dialect {
  const sample = lines.filter((line) => line.trim() !== "" && !COMMENT.test(line)).slice(0, 200);
  const scores = DIALECTS.map((dialect) => {
    const counts = sample.map((line) => countNumbers(line, dialect)).filter((count) => count >= 2);
    // Whole frequencies beside levels with a decimal comma are rows either way: the cells tell.
    return counts.length * MOST_CELLS + counts.reduce((sum, count) => sum + count, 0);
  });
  return DIALECTS[scores.indexOf(Math.max(...scores))] ?? { split: byBlanks, decimalComma: false };
}

/** Cells that are numbers; 0 as soon as a filled cell is none, so that "1,5;2" is not taken for "1 | 5;2". */
function countNumbers(line: string, dialect: Dialect): number {
  const cells = toNumbers(line, dialect);
  return cells === null ? 0 : cells.filter((x) => !Number.isNaN(x)).length;
}

function toNumbers(line: string, { split, decimalComma }: Dialect): number[] | null {
  const cells = split(line).map((cell) => (decimalComma ? cell.replace(",", ".") : cell));
  while (cells.length > 0 && cells.at(-1) === "") cells.pop();
  if (!NUMBER.test(cells[0] ?? "")) return null;
  return cells.map((cell) => (NUMBER.test(cell) ? Number(cell) : Number.NaN));
}

/** The last line above the numbers that has cells; a unit line under a head of names is joined to it. */
function keepBetterHead(head: string[], line: string, { split }: Dialect): string[] {
  const bare = line.replace(COMMENT, "").toLowerCase();
  const cells = split(bare).filter((cell, i, all) => cell !== "" || i < all.length - 1);
  const joined = joinUnits(cells);
  const areUnits = joined.every((cell) => /^[([]?(?:k?hz|db[ a-z]*|deg|°|%|spl)[)\]]?$/.test(cell));
  return areUnits && head.length === joined.length
    ? head.map((name, i) => `${name} ${joined[i] ?? ""}`)
    : joined;
}

/** "freq (hz)" is one cell where blanks separate. */
function joinUnits(cells: readonly string[]): string[] {
  const joined: string[] = [];
  for (const cell of cells) {
    if (/^[([]/.test(cell) && joined.length > 0) joined[joined.length - 1] += ` ${cell}`;
    else joined.push(cell);
  }
  return joined;
}
