/** The part of opentype.js that outlines need; the package brings no types of its own. */
declare module "opentype.js/dist/opentype.mjs" {
  export interface Glyph {
    /** In font units. */
    advanceWidth?: number;
    /** @param x, y the pen, y of the base line; grows downwards. */
    getPath(x: number, y: number, size: number): Path;
  }
  export type PathCommand =
    | { type: "M" | "L"; x: number; y: number }
    | { type: "Q"; x1: number; y1: number; x: number; y: number }
    | { type: "C"; x1: number; y1: number; x2: number; y2: number; x: number; y: number }
    | { type: "Z" };
  export interface Path {
    commands: PathCommand[];
  }
  export interface Font {
    unitsPerEm: number;
    /** 0 where the font has no such character. */
    charToGlyphIndex(char: string): number;
    charToGlyph(char: string): Glyph;
    /** In font units. */
    getKerningValue(left: Glyph, right: Glyph): number;
  }
  export function parse(bytes: ArrayBuffer): Font;
}
