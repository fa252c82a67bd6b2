/** Text in lines: where they break, and where they stand. */
import { round2, type TextShape } from "./figure";

export type TextLook = Pick<TextShape, "size" | "weight" | "family" | "tighten">;

/**
 * Lines no wider than the room; breaks at plain spaces alone, so that number and unit stay
 * together. A word wider than the room stands on a line of its own.
 * @param measure width of a text, px
 */
export function wrapText(
  text: string,
  roomPx: number,
  measure: (text: string) => number,
): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ").filter((one) => one !== "")) {
    const longer = line === "" ? word : `${line} ${word}`;
    if (line !== "" && measure(longer) > roomPx) {
      lines.push(line);
      line = word;
    } else line = longer;
  }
  return line === "" ? lines : [...lines, line];
}

/** Base lines of a paragraph. @param y of the first; @param step from line to line. */
export const toLineShapes = (
  lines: readonly string[],
  { x, y, step, ...look }: TextLook & Pick<TextShape, "x" | "y" | "fill"> & { step: number },
): TextShape[] =>
  lines.map((text, at) => ({ kind: "text", x, y: round2(y + at * step), text, ...look }));
