import { describe, expect, it } from "vitest";
import { toSmallWall, type SmallWallBand } from "./small-wall";

const band = (change: Partial<SmallWallBand>): SmallWallBand => ({
  nominal_Hz: 63,
  status: "not reached",
  spl_dB: 101,
  reached_dB: 101,
  ...change,
});
const roles = (bands: SmallWallBand[]): (string | undefined)[] =>
  toSmallWall(bands).shapes.map((s) => s.role);

describe("toSmallWall", () => {
  it("shares its width evenly among the bands", () => {
    const figure = toSmallWall(Array.from({ length: 27 }, () => band({})));
    const xs = figure.shapes.flatMap((s) => (s.kind === "rect" ? [s.x] : []));
    expect(xs).toHaveLength(27);
    expect(xs[1]).toBeCloseTo(7.47, 2);
    const last = figure.shapes.findLast((s) => s.kind === "rect");
    expect(last?.kind === "rect" && last.x + last.width).toBeCloseTo(201, 1);
  });

  it.each([
    [60, 37.5],
    [106, 0],
    [120, 0],
    [83, 18.75],
  ])("puts the top of %s dB at y %s", (reached_dB, y) => {
    const water = toSmallWall([band({ reached_dB })]).shapes.find((s) => s.role === "water");
    expect(water?.kind === "rect" && water.y).toBeCloseTo(y, 2);
  });

  it("caps a limit that was reached and leaves the others open", () => {
    expect(roles([band({ status: "found", spl_dB: 94 })])).toContain("cap");
    expect(roles([band({})])).not.toContain("cap");
  });

  it("draws no water where the lowest run was past the limit already", () => {
    const drawn = roles([band({ status: "below lowest", spl_dB: 76 })]);
    expect(drawn).toContain("below");
    expect(drawn).not.toContain("water");
  });

  it("dots what was not assessed, also where nothing is known", () => {
    expect(roles([band({ status: "not assessed", spl_dB: null, reached_dB: null })])).toEqual([
      "not-assessed",
      "rule",
      "rule",
      "ground",
    ]);
  });
});
