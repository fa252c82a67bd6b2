/** Tables for a spreadsheet: RFC 4180, CRLF, comment lines first. */

/** A cell that a spreadsheet would take for a formula gets an apostrophe before it; numbers stay numbers. */
function toCell(cell: string | number | null): string {
  if (cell === null) return "";
  if (typeof cell === "number") return String(cell);
  const safe = /^[=+\-@\t\r]/.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/**
 * @param comments stand over the head, each after "# "; non-breaking spaces become plain ones.
 * @param rows null is an empty cell.
 */
export function toCsv(
  comments: readonly string[],
  head: readonly string[],
  rows: readonly (readonly (string | number | null)[])[],
): string {
  const toLine = (cells: readonly (string | number | null)[]): string =>
    cells.map(toCell).join(",");
  return [
    ...comments.map((line) => toCell(`# ${line.replaceAll("\u00a0", " ")}`)),
    toLine(head),
    ...rows.map(toLine),
    "",
  ].join("\r\n");
}
