import { describe, expect, it } from "vitest";
import { CELLS_PER_BAND, thirdOctaves, toFirstCellOf, twentyFourthOctaves } from "./bands";

describe("bands of a sweep from 20 Hz to 20 kHz", () => {
  it("reach from 40 Hz to 16 kHz", () => {
    const measured = thirdOctaves(20, 20_000);
    expect([measured[0]?.nominalHz, measured.at(-1)?.nominalHz]).toEqual([40, 16_000]);
  });

  it("are tiled by eight grid cells each, edge to edge", () => {
    const grid = twentyFourthOctaves(20, 20_000);
    for (const band of thirdOctaves(20, 20_000)) {
      const first = toFirstCellOf(band, grid);
      expect(grid.edgeHz[first]! / band.lowHz).toBeCloseTo(1, 12);
      expect(grid.edgeHz[first + CELLS_PER_BAND]! / band.highHz).toBeCloseTo(1, 12);
    }
    expect(grid.edgeHz[0]).toBeGreaterThanOrEqual(20);
    expect(grid.edgeHz.at(-1)).toBeLessThanOrEqual(20_000);
  });
});
