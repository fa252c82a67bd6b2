/** Text as outlines, and its width: pictures then look the same wherever they are opened. */
import type { Font, Glyph, PathCommand } from "opentype.js/dist/opentype.mjs";
import { round2, type Figure, type PathShape, type Shape, type TextShape } from "../charts/figure";
import type { TextLook } from "../charts/text-lines";
import { findFont, toStaticWeight } from "./static-fonts";

interface SetGlyph {
  glyph: Glyph;
  /** Pen, px from the text's start. */
  x: number;
}

/** What stands for a character that no font has. */
const UNKNOWN = "?";

/** The characters in place, with kerning, and the pen after the last. */
function setText(text: string, look: TextLook): { glyphs: SetGlyph[]; width: number } {
  const family = look.family ?? "figures";
  const weight = toStaticWeight(look.weight);
  const glyphs: SetGlyph[] = [];
  let x = 0;
  let before: { font: Font; glyph: Glyph } | undefined;
  for (const char of text) {
    const own = findFont(char, family, weight);
    const font = own ?? findFont(UNKNOWN, family, weight);
    if (font === null) continue;
    const glyph = font.charToGlyph(own === null ? UNKNOWN : char);
    const toPx = look.size / font.unitsPerEm;
    if (before?.font === font) x += font.getKerningValue(before.glyph, glyph) * toPx;
    glyphs.push({ glyph, x });
    x += (glyph.advanceWidth ?? 0) * toPx - (look.tighten ?? 0);
    before = { font, glyph };
  }
  return { glyphs, width: x };
}

/** @returns px from the text's start to the pen after its last character. */
export const measureText = (text: string, look: TextLook): number => setText(text, look).width;

/** Written here: the package's own writer loses numbers that lie just beside a rounding. */
function toPathText(command: PathCommand): string {
  if (command.type === "Z") return "Z";
  const { type, x, y } = command;
  const points =
    type === "Q"
      ? [command.x1, command.y1, x, y]
      : type === "C"
        ? [command.x1, command.y1, command.x2, command.y2, x, y]
        : [x, y];
  return `${type}${points.map(round2).join(" ")}`;
}

const ANCHORS = { start: 0, middle: 0.5, end: 1 } as const;

/** @returns one path for the text; its rim, where it has one, under it. */
export function outlineText(text: TextShape): PathShape[] {
  const { glyphs, width } = setText(text.text, text);
  const from = text.x - width * ANCHORS[text.anchor ?? "start"];
  const d = glyphs
    .flatMap(({ glyph, x }) => glyph.getPath(from + x, text.y, text.size).commands)
    .map(toPathText)
    .join("");
  if (d === "") return [];
  const letters: PathShape = { kind: "path", role: "outline", d, fill: text.fill };
  return text.halo === undefined
    ? [letters]
    : [{ kind: "path", role: "outline-rim", d, stroke: text.halo, strokeWidth: 4 }, letters];
}

const outlineShapes = (shapes: readonly Shape[]): Shape[] =>
  shapes.flatMap((shape): Shape[] => {
    if (shape.kind === "text") return outlineText(shape);
    return shape.kind === "group" ? [{ ...shape, shapes: outlineShapes(shape.shapes) }] : [shape];
  });

/** The same figure without any text in it. */
export const outlineFigure = (figure: Figure): Figure => ({
  ...figure,
  shapes: outlineShapes(figure.shapes),
});
