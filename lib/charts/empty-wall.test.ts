import { describe, expect, it } from "vitest";
import { toEmptyWall } from "./empty-wall";
import { flattenShapes } from "./figure";

const input = {
  lowestDb: 76,
  highestDb: 102,
  pitch: 20,
  plotHeight: 150,
  startHz: 20,
  stopHz: 20_000,
};

describe("the frame of a wall without water", () => {
  it("draws one outline per band of the sweep, from the lowest level down to the neatline", () => {
    const figure = toEmptyWall(input);
    const outlines = flattenShapes(figure.shapes).filter((shape) => shape.role === "outline");
    expect(outlines).toHaveLength(27);
    for (const outline of outlines) {
      if (outline.kind !== "rect") throw new Error("an outline is a rectangle");
      expect(outline.y + outline.height).toBeCloseTo(156, 1);
      // 60 to 110 dB over 150 px would be 3 px a decibel; the range in use decides.
      expect(outline.height).toBeGreaterThan(30);
    }
    expect(figure.width).toBe(52 + 27 * 20 + 6);
  });

  it("draws no outline where no level is planned yet", () => {
    const shapes = flattenShapes(toEmptyWall({ ...input, lowestDb: null }).shapes);
    expect(shapes.filter((shape) => shape.role === "outline")).toEqual([]);
  });
});
