/** RFC 4180 text: cells quoted where they must be, lines ended by CRLF. */

/** A cell that a spreadsheet would take for a formula; numbers may begin with a sign. */
const FORMULA = /^'*[=+\-@\t\r]/;
const NUMBER = /^-?\d+(\.\d+)?(e-?\d+)?$/i;

/** A text that a spreadsheet would take for a formula gets an apostrophe before it. */
function toCell(text: string): string {
  const safe = FORMULA.test(text) && !NUMBER.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

export const toCsvLine = (cells: readonly string[]): string => cells.map(toCell).join(",");

/** @returns [lines][cells] as they were given to toCsvLine. */
export function parseCsv(text: string): string[][] {
  const lines: string[][] = [];
  let line: string[] = [];
  for (const [whole, quoted, plain, end] of text.matchAll(
    /(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r?\n|$)/g,
  )) {
    if (whole === "" && line.length === 0) continue;
    const cell = quoted === undefined ? (plain ?? "") : quoted.replaceAll('""', '"');
    const bare = cell.slice(1);
    line.push(cell.startsWith("'") && FORMULA.test(bare) && !NUMBER.test(bare) ? bare : cell);
    if (end !== ",") {
      lines.push(line);
      line = [];
    }
  }
  return lines;
}
