import { describe, expect, it } from "vitest";
import { makeSampleSnapshot } from "../../tests/support/sample-publication";
import { flattenShapes, type Pattern } from "../charts/figure";
import { toReaderWall } from "../charts/reader-wall";
import { COLOURS } from "../charts/tokens";
import { drawHatches, hatchLines } from "./hatch";

const pattern = (turn: number): Pattern => ({
  name: "p",
  pitch: 4,
  width: 1,
  offset: 1,
  turn,
  line: COLOURS.ink,
  ground: COLOURS.sheet,
});
const BOX = { x: 13, y: 7, width: 30, height: 20 };

describe("hatchLines", () => {
  it("are upright lines at the tile's offset", () => {
    expect(hatchLines({ x: 0, y: 0, width: 10, height: 5 }, pattern(0))).toEqual([
      [
        [1, 0],
        [1, 5],
      ],
      [
        [5, 0],
        [5, 5],
      ],
      [
        [9, 0],
        [9, 5],
      ],
    ]);
  });

  it.each([0, 30, 45, -45, 90])("turned by %d, stay in the box, a pitch apart", (turn) => {
    const lines = hatchLines(BOX, pattern(turn));
    expect(lines.length).toBeGreaterThan(4);
    const angle = (turn * Math.PI) / 180;
    for (const [at, [from, to]] of lines.entries()) {
      for (const [x, y] of [from, to]) {
        expect(x).toBeGreaterThanOrEqual(BOX.x);
        expect(x).toBeLessThanOrEqual(BOX.x + BOX.width);
        expect(y).toBeGreaterThanOrEqual(BOX.y);
        expect(y).toBeLessThanOrEqual(BOX.y + BOX.height);
      }
      const distance = from[0] * Math.cos(angle) + from[1] * Math.sin(angle);
      const first = lines[0]?.[0] ?? from;
      const start = first[0] * Math.cos(angle) + first[1] * Math.sin(angle);
      // Ends are rounded to a hundredth.
      expect(distance - start).toBeCloseTo(4 * at, 1);
      expect((distance - 1) / 4).toBeCloseTo(Math.round((distance - 1) / 4), 1);
    }
  });

  it("miss a box that lies between two of them", () => {
    expect(hatchLines({ x: 2, y: 0, width: 2, height: 5 }, pattern(0))).toEqual([]);
  });
});

describe("drawHatches", () => {
  it("leaves no pattern in a wall, and every other shape as it was", () => {
    const wall = toReaderWall(makeSampleSnapshot(), { width: 600, plotHeight: 200, narrow: true });
    const drawn = drawHatches(wall);
    const before = flattenShapes(wall.shapes);
    const after = flattenShapes(drawn.shapes);
    const hatched = before.filter(
      (s) => "fill" in s && s.fill !== undefined && "pattern" in s.fill,
    );
    expect(hatched.length).toBeGreaterThan(3);
    expect(after.some((s) => "fill" in s && s.fill !== undefined && "pattern" in s.fill)).toBe(
      false,
    );
    expect(after.filter((s) => s.role === "hatch").length).toBeGreaterThan(3);
    expect(after.filter((s) => s.kind === "text")).toEqual(before.filter((s) => s.kind === "text"));
  });
});
