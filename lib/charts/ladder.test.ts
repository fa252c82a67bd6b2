import { describe, expect, it } from "vitest";
import { flattenShapes } from "./figure";
import { PLAN_LADDER, RUNS_LADDER, toLadderFigure, toStepHeight, type LadderStep } from "./ladder";

const step = (change: Partial<LadderStep>): LadderStep => ({
  levelDb: 76,
  longTerm: false,
  state: "full",
  mark: null,
  label: ["76 dB"],
  note: null,
  ...change,
});

describe("toStepHeight", () => {
  const levels = [76, 86, 96, 102];
  it.each([
    [76, 34],
    [102, 89],
    [89, 61.5],
    [null, 26],
  ])("%s dB stands %s px high", (level, height) => {
    expect(toStepHeight(level, levels, RUNS_LADDER)).toBeCloseTo(height, 6);
  });

  it("lets a level alone stand at full height", () => {
    expect(toStepHeight(90, [90], RUNS_LADDER)).toBe(89);
  });
});

describe("toLadderFigure", () => {
  it("sets steps side by side on one ground line", () => {
    const figure = toLadderFigure([step({}), step({ levelDb: 102, note: "−3 dBFS" })], PLAN_LADDER);
    expect(figure.width).toBe(2 * 72 + 8);
    const waters = flattenShapes(figure.shapes).filter((s) => s.role === "water");
    const feet = waters.map((s) => (s.kind === "rect" ? s.y + s.height : Number.NaN));
    expect(feet).toEqual([113, 113]);
    expect(figure.shapes.some((s) => s.role === "ground")).toBe(true);
  });

  it("cuts long-term water in two", () => {
    const shapes = flattenShapes(toLadderFigure([step({ longTerm: true })], PLAN_LADDER).shapes);
    expect(shapes.filter((s) => s.role === "cut")).toHaveLength(1);
  });

  it("leaves a place without a recording empty and dashed", () => {
    const shapes = flattenShapes(
      toLadderFigure([step({ state: "locked", mark: "locked" })], RUNS_LADDER).shapes,
    );
    const roles = shapes.map((s) => s.role);
    expect(roles).toContain("dashes");
    expect(roles).toContain("mark-locked");
    expect(roles).not.toContain("water");
  });

  it("makes room for a second line of words", () => {
    const one = toLadderFigure([step({})], RUNS_LADDER).height;
    const two = toLadderFigure([step({ label: ["102 dB", "long"] })], RUNS_LADDER).height;
    expect(two - one).toBe(13);
  });
});
