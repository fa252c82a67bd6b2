import type { ByteRange } from "../storage/recording-store";

/**
 * The header `Range` with one range of bytes (RFC 9110 section 14).
 *
 * @returns null where the whole is to be sent: no header, another unit, or more than one range.
 */
export function parseRange(
  header: string | null,
  size: number,
): ByteRange | "unsatisfiable" | null {
  const found = /^bytes=(\d*)-(\d*)$/.exec(header?.trim() ?? "");
  if (found === null) return null;
  const [, first = "", last = ""] = found;
  if (first === "" && last === "") return null;
  // "-500" asks for the last 500 bytes.
  const from = first === "" ? Math.max(0, size - Number(last)) : Number(first);
  const to = first === "" || last === "" ? size - 1 : Math.min(size - 1, Number(last));
  if (first !== "" && last !== "" && Number(last) < Number(first)) return null;
  return from >= size || (first === "" && last === "0") ? "unsatisfiable" : { from, to };
}
