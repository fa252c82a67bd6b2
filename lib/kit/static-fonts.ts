/**
 * The fonts of everything that leaves the screen: static cuts of the screen's families, because
 * pictures and PDF cannot read a variable font. A file of another script stands behind each Latin one.
 */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { parse, type Font } from "opentype.js/dist/opentype.mjs";
import type { TextShape } from "../charts/figure";

type Family = NonNullable<TextShape["family"]>;
export type StaticWeight = 400 | 600 | 700;

const PROSE = "@fontsource/atkinson-hyperlegible-next/files/atkinson-hyperlegible-next";
const FIGURES = "@fontsource/roboto-mono/files/roboto-mono";

const FILES: Record<Family, (weight: StaticWeight) => string[]> = {
  prose: (weight) => [
    `${PROSE}-latin-${weight}-normal.woff`,
    `${PROSE}-latin-ext-${weight}-normal.woff`,
    ...scriptFiles(weight),
  ],
  figures: (weight) => [
    `${FIGURES}-latin-${weight}-normal.woff`,
    `${FIGURES}-latin-ext-${weight}-normal.woff`,
    ...scriptFiles(weight),
  ],
};

/** Scripts that the prose family does not have. */
const scriptFiles = (weight: StaticWeight): string[] =>
  ["greek", "cyrillic"].map((script) => `${FIGURES}-${script}-${weight}-normal.woff`);

/** Weights of the screen that lie between two static cuts take the bolder one. */
export const toStaticWeight = (weight = 400): StaticWeight =>
  weight <= 500 ? 400 : weight <= 600 ? 600 : 700;

/** @returns absolute paths of woff files, first choice first. The working directory is the clone. */
export const listFontFiles = (family: Family, weight: StaticWeight): string[] =>
  FILES[family](weight).map((file) =>
    join(/* turbopackIgnore: true */ process.cwd(), "node_modules", file),
  );

const parsed = new Map<string, Font>();

function readFont(path: string): Font {
  const known = parsed.get(path);
  if (known !== undefined) return known;
  const bytes = readFileSync(path);
  const font = parse(new Uint8Array(bytes).buffer);
  parsed.set(path, font);
  return font;
}

/**
 * The first font that has the character. Kept parsed: a font costs milliseconds once.
 * @returns null where none has it.
 */
export function findFont(char: string, family: Family, weight: StaticWeight): Font | null {
  for (const path of listFontFiles(family, weight)) {
    const font = readFont(path);
    if (font.charToGlyphIndex(char) !== 0) return font;
  }
  return null;
}
