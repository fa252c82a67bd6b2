import { describe, expect, it } from "vitest";
import { flattenShapes, type Figure } from "../charts/figure";
import { COLOURS } from "../charts/tokens";
import { toMaxLevelNotice } from "../exposure/notices";
import { frameFigure } from "./framed-figure";
import { measureText } from "./outlines";

const figure = (width: number): Figure => ({
  width,
  height: 100,
  patterns: [],
  shapes: [{ kind: "rect", role: "figure", x: 0, y: 0, width, height: 100, fill: COLOURS.ink }],
});
const WORDS = {
  title: "Osier 8A: output limit and compression by band",
  method:
    "Sine sweep, one tone at a time, unweighted; limit: 10 % distortion or 3 dB compression; music differs.",
  notice: toMaxLevelNotice({ levelDb: 103.4, distanceM: 1, mayPlayLouder: true }),
};

describe("frameFigure", () => {
  it.each([120, 460, 1100])("keeps words and figure apart and within it, %d px wide", (width) => {
    const framed = frameFigure(figure(width), WORDS, measureText);
    const texts = flattenShapes(framed.shapes).filter((shape) => shape.kind === "text");
    const words = texts.map((text) => text.text).join(" ");
    for (const part of [WORDS.title, WORDS.method, "WARNING", "Up to 104\u00a0dB at 1\u00a0m:"]) {
      expect(words).toContain(part);
    }
    const group = framed.shapes.find((shape) => shape.kind === "group");
    const top = group?.kind === "group" ? (group.y ?? 0) : 0;
    for (const text of texts) {
      expect(text.x + measureText(text.text, text)).toBeLessThanOrEqual(framed.width);
      expect(text.y).toBeLessThan(framed.height);
      // Over it or under it, never on it.
      expect(text.y < top || text.y - text.size * 0.8 > top + 100).toBe(true);
    }
  });

  it("has no notice where no level is shown", () => {
    const framed = frameFigure(figure(460), { ...WORDS, notice: null }, measureText);
    const shapes = flattenShapes(framed.shapes);
    expect(shapes.some((shape) => shape.kind === "text" && shape.text === "WARNING")).toBe(false);
    expect(framed.height).toBeLessThan(frameFigure(figure(460), WORDS, measureText).height);
  });
});
