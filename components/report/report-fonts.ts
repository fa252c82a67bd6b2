/** The fonts of the report, known to the PDF writer by these names. */
import { Font } from "@react-pdf/renderer";
import { findFont, listFontFiles, type StaticWeight } from "@/lib/kit/static-fonts";

const WEIGHTS: readonly StaticWeight[] = [400, 600, 700];
const SCRIPTS = ["Latin", "LatinExt", "Greek", "Cyrillic"] as const;

/** First choice first: a character is looked for along the list. */
export const PROSE = SCRIPTS.map((script) => `prose${script}`);
export const FIGURES = SCRIPTS.map((script) => `figures${script}`);

let registered = false;

/** Once per process. */
export function registerFonts(): void {
  if (registered) return;
  for (const family of ["prose", "figures"] as const) {
    for (const fontWeight of WEIGHTS) {
      for (const [at, src] of listFontFiles(family, fontWeight).entries()) {
        const name = SCRIPTS[at];
        if (name !== undefined) Font.register({ family: `${family}${name}`, src, fontWeight });
      }
    }
  }
  // Words are never parted: a unit would lose its number.
  Font.registerHyphenationCallback((word) => [word]);
  registered = true;
}

/** A text in which every character has a font; the others would print as something else. */
export const toPrintable = (text: string): string =>
  Array.from(text, (char) =>
    char === "\n" || findFont(char, "prose", 400) !== null ? char : "?",
  ).join("");
