import { describe, expect, it } from "vitest";
import { flattenShapes } from "../charts/figure";
import { COLOURS } from "../charts/tokens";
import type { TextLook } from "../charts/text-lines";
import { measureText, outlineFigure, outlineText } from "./outlines";

const PROSE: TextLook = { family: "prose", size: 17, weight: 700 };
const FIGURES: TextLook = { family: "figures", size: 12 };
const at = (text: string, x = 0) =>
  outlineText({ kind: "text", x, y: 20, text, fill: COLOURS.ink, ...PROSE });

/** Every number of a path, and whether each command has as many as it needs. */
function readPath(d: string): { numbers: number[]; whole: boolean } {
  const parts = d.match(/[A-Za-z][^A-Za-z]*/g) ?? [];
  const needs: Record<string, number> = { M: 2, L: 2, Q: 4, C: 6, Z: 0 };
  const read = parts.map((part) => ({
    command: part[0] ?? "",
    numbers: (part.slice(1).match(/-?\d*\.?\d+/g) ?? []).map(Number),
  }));
  return {
    numbers: read.flatMap((one) => one.numbers),
    whole: read.every((one) => one.numbers.length === needs[one.command]),
  };
}

describe("outlines", () => {
  it("are whole paths wherever the text stands", () => {
    for (let x = 0; x < 40; x += 0.37) {
      const [path] = at(
        "At 50\u00a0Hz it stops at 93\u00a0dB, however far \u2212 \u2019 \u00b1",
        x,
      );
      expect(path?.d).not.toContain("NaN");
      expect(readPath(path?.d ?? "").whole).toBe(true);
    }
  });

  it("stand upright on their base line", () => {
    const [path] = at("H");
    const ys = readPath(path?.d ?? "").numbers.filter((_, n) => n % 2 === 1);
    expect(Math.max(...ys)).toBeCloseTo(20, 1);
    // Capitals of this face are two thirds of its size.
    expect(20 - Math.min(...ys)).toBeCloseTo(0.668 * 17, 1);
  });

  it("are as wide as their text, wherever it is anchored", () => {
    const width = measureText("Osier 8A", PROSE);
    const box = (anchor: "start" | "middle" | "end") => {
      const [path] = outlineText({
        kind: "text",
        x: 100,
        y: 0,
        text: "Osier 8A",
        anchor,
        fill: COLOURS.ink,
        ...PROSE,
      });
      return Math.min(...readPath(path?.d ?? "").numbers.filter((_, n) => n % 2 === 0));
    };
    expect(box("start") - box("middle")).toBeCloseTo(width / 2, 1);
    expect(box("start") - box("end")).toBeCloseTo(width, 1);
  });

  it("give figures one pitch, and other scripts their own letters", () => {
    expect(measureText("1111", FIGURES)).toBeCloseTo(measureText("8888", FIGURES), 6);
    for (const text of ["\u03a9", "\u0416", "\u0151"]) expect(at(text)).not.toEqual(at("?"));
    // No font of ours has it.
    expect(at("\u6f6e")).toEqual(at("?"));
  });

  it("leave no text in a figure, however deep", () => {
    const text = { kind: "text", x: 1, y: 2, text: "a", size: 10, fill: COLOURS.ink } as const;
    const figure = outlineFigure({
      width: 10,
      height: 10,
      patterns: [],
      shapes: [{ kind: "group", shapes: [{ kind: "group", shapes: [text] }] }, text],
    });
    const kinds = flattenShapes(figure.shapes).map((shape) => shape.kind);
    expect(kinds).toEqual(["group", "group", "path", "path"]);
  });
});
