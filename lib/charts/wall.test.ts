import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import type { Limit, Result } from "../result/result-schema";
import { toBandColumns } from "./band-columns";
import { sayColumn, sayFinding, sayWall } from "./band-words";
import { flattenShapes, type GroupShape, type RectShape, type Shape } from "./figure";
import { NBSP } from "./format";
import { toWall, type WallFigure } from "./wall";

const PAIR = { thd_percent: 10, compression_dB: 3 };

function wallOf(result: Result, criterion = PAIR): WallFigure {
  return toWall(toBandColumns({ result, criterion }));
}

function columnOf(wall: WallFigure, nominalHz: number): Shape[] {
  const group = wall.plot.shapes.find(
    (shape): shape is GroupShape =>
      shape.kind === "group" && shape.role === "column" && shape.band === nominalHz,
  );
  return group === undefined ? [] : flattenShapes(group.shapes);
}

const rolesOf = (shapes: readonly Shape[]): Set<string> =>
  new Set(shapes.flatMap((s) => s.role ?? []));
const rectsOf = (shapes: readonly Shape[], role: string): RectShape[] =>
  shapes.filter((s): s is RectShape => s.kind === "rect" && s.role === role);

/** Replaces every limit of one band. */
function withLimit(nominalHz: number, change: Partial<Limit>): Result {
  const result = makeSampleResult();
  const band = result.bands.find((b) => b.nominal_Hz === nominalHz);
  if (band === undefined) throw new Error(`no band ${nominalHz}`);
  band.limits = [
    {
      criterion: PAIR,
      kind: "short-term",
      status: "found",
      nominal_dB: null,
      low_dB: null,
      high_dB: null,
      spl_dB: null,
      bound_by: null,
      reached: null,
      ...change,
    },
  ];
  return result;
}

describe("a column that did not reach its limit", () => {
  const wall = wallOf(makeSampleResult());
  const column = columnOf(wall, 1000);
  it("stacks four solid waters without a hole, from the base to the measured level", () => {
    const waters = rectsOf(column, "water");
    expect(waters).toHaveLength(4);
    let bottom = wall.foot;
    for (const water of waters) {
      expect(water.y + water.height).toBeCloseTo(bottom, 1);
      bottom = water.y;
    }
    const loudest = makeSampleResult().bands[14]?.levels.find((run) => run.level_dB === 102);
    expect(bottom).toBeCloseTo(wall.top + wall.scale.toY(loudest?.spl_dB ?? Number.NaN), 1);
  });
  it("carries posts and neither limit line, hatch nor notch", () => {
    const roles = rolesOf(column);
    expect(roles.has("not-reached")).toBe(true);
    for (const role of ["limit", "past-limit", "compression", "onset"])
      expect(roles.has(role)).toBe(false);
  });
  it("has 1 px of the gap at each side", () => {
    for (const water of rectsOf(column, "water")) {
      expect(water.x).toBe(wall.bands.left(14) + 1);
      expect(water.width).toBe(28);
    }
  });
});

describe("a column that a limiter holds", () => {
  const result = makeSampleResult();
  const wall = wallOf(result);
  const column = columnOf(wall, 63);
  const { columns } = toBandColumns({ result, criterion: PAIR });
  const facts = columns.find((c) => c.nominalHz === 63);
  it("is solid up to the limit and lined above it", () => {
    const limitY = wall.top + wall.scale.toY(facts?.limitDb ?? Number.NaN);
    const past = rectsOf(column, "past-limit");
    expect(past.length).toBeGreaterThan(0);
    for (const rect of past) expect(rect.y + rect.height).toBeLessThanOrEqual(limitY + 0.02);
    for (const water of rectsOf(column, "water"))
      expect(water.y).toBeGreaterThanOrEqual(limitY - 0.02);
  });
  it("has a 3 px line at the limit, half a pixel wider at each side", () => {
    const [line] = rectsOf(column, "limit");
    const limitY = wall.top + wall.scale.toY(facts?.limitDb ?? Number.NaN);
    expect(line?.height).toBe(3);
    expect((line?.y ?? 0) + 1.5).toBeCloseTo(limitY, 1);
    expect(line?.width).toBe(29);
    expect(line?.x).toBe(wall.bands.left(2) + 0.5);
  });
  it("is hatched from the highest measured level to the expected one", () => {
    const [hatch] = rectsOf(column, "compression");
    expect(hatch?.y).toBeCloseTo(wall.top + wall.scale.toY(facts?.expectedDb ?? Number.NaN), 1);
    expect((hatch?.y ?? 0) + (hatch?.height ?? 0)).toBeCloseTo(
      wall.top + wall.scale.toY(facts?.topDb ?? Number.NaN),
      1,
    );
  });
  it("is drawn in order: water, tidelines, hatch, limit, notch", () => {
    const order = ["water", "tideline", "compression", "limit", "onset"].map((role) =>
      column.findIndex((s) => s.role === role),
    );
    expect(order).toEqual(order.toSorted((a, b) => a - b));
    expect(order[0]).toBeGreaterThanOrEqual(0);
  });
});

describe("states that are never blank", () => {
  it("turns the posts over at the lowest level where the limit lies below", () => {
    const wall = wallOf(
      withLimit(1000, { status: "below lowest", nominal_dB: 76, spl_dB: 75, reached: true }),
    );
    const roles = rolesOf(columnOf(wall, 1000));
    expect(roles.has("below-lowest")).toBe(true);
    expect(roles.has("water")).toBe(false);
    expect(roles.has("past-limit")).toBe(true);
  });
  it("dots a band that was not assessed", () => {
    const roles = rolesOf(columnOf(wallOf(withLimit(1000, { status: "not assessed" })), 1000));
    expect(roles.has("not-assessed")).toBe(true);
    expect(roles.has("not-reached")).toBe(false);
  });
  it("hatches a band in the noise", () => {
    const result = makeSampleResult();
    for (const level of result.bands[0]?.levels ?? []) {
      level.spl_dB = null;
      level.compression_dB = null;
    }
    expect([...rolesOf(columnOf(wallOf(result), 40))]).toEqual(["in-noise"]);
  });
  it("draws on the scale of the run level where SPL does not hold", () => {
    const result = { ...makeSampleResult(), spl_valid: false };
    for (const band of result.bands) {
      for (const level of band.levels) {
        level.spl_dB = null;
        level.expected_dB = null;
      }
      for (const limit of band.limits) limit.spl_dB = null;
      band.onset.spl_dB = null;
    }
    const facts = toBandColumns({ result, criterion: PAIR });
    expect(facts.columns[14]?.measuredDb[0]).toBe(76);
    // 3 dB are lost where the limit lies, so the output there is its drive less 3 dB.
    const limit = facts.columns[2]?.limit.nominal_dB ?? Number.NaN;
    expect(facts.columns[2]?.limitDb).toBeCloseTo(limit - 3, 1);
    expect(rolesOf(columnOf(wallOf(result), 63)).has("limit")).toBe(true);
  });
});

describe("the frame", () => {
  const wall = wallOf(makeSampleResult());
  it("has 23 staff blocks of 2 dB that alternate, and one neatline block per band", () => {
    const blocks = rectsOf(wall.staff.shapes, "staff-block");
    expect(blocks).toHaveLength(23);
    expect(new Set(blocks.map((b) => b.x)).size).toBe(2);
    expect(blocks.reduce((sum, b) => sum + b.height, 0)).toBeCloseTo(468, 0);
    expect(rectsOf(wall.plot.shapes, "neatline-block")).toHaveLength(27);
  });
  it("grows by tens, never shrinks", () => {
    const loud = makeSampleResult();
    for (const level of loud.bands[5]?.levels ?? []) level.expected_dB = 109;
    for (const level of loud.bands[5]?.levels ?? []) level.compression_dB = 2;
    expect(wallOf(loud).scale.maxDb).toBe(116);
    expect(wall.scale.maxDb).toBe(106);
  });
  it("names everything in the key without two labels touching, each run with a ring", () => {
    const labels = flattenShapes(wall.key.shapes).filter(
      (s) => s.kind === "text" && s.role === "key-label",
    );
    const at = labels.map((s) => (s.kind === "text" ? s.y : 0)).toSorted((a, b) => a - b);
    const gaps = at.slice(1).map((y, i) => y - (at[i] ?? 0));
    expect(Math.min(...gaps)).toBeGreaterThanOrEqual(14 - 0.02);
    expect(flattenShapes(wall.key.shapes).filter((s) => s.role === "ring")).toHaveLength(4);
  });
});

describe("words", () => {
  const result = makeSampleResult();
  const { columns, levels } = toBandColumns({
    result,
    criterion: PAIR,
    decisions: new Map([[50, { state: "confirmed", cause: "limiter" }]]),
  });
  const at = (hz: number) => {
    const column = columns.find((c) => c.nominalHz === hz);
    if (column === undefined) throw new Error(`no band ${hz}`);
    return column;
  };
  it("says a found limit, the onset and the loss, with their units", () => {
    expect(sayFinding(at(63), levels).replaceAll(NBSP, " ")).toBe(
      "limit 93.1 dB, set by compression · onset 92.2 dB · 102 dB run: +8.1 dB compression",
    );
  });
  it("says at least where the limit was not reached", () => {
    expect(sayFinding(at(1000), levels).replaceAll(NBSP, " ")).toBe(
      "limit not reached, at least 101.5 dB · no onset up to the 102 dB run",
    );
  });
  it("names a column in full", () => {
    expect(sayColumn(at(63), levels).replaceAll(NBSP, " ")).toBe(
      "63 hertz: limit 93.1 dB set by compression, onset 92.2 dB, 102 dB run: +8.1 dB compression, limiter, no decision yet",
    );
    expect(sayColumn(at(50), levels)).toMatch(/limiter, confirmed$/);
  });
  it("sums the figure up in one sentence", () => {
    expect(sayWall(columns, levels).replaceAll(NBSP, " ")).toBe(
      "Gives out first at 50 Hz: limit 91.8 dB, set by compression. 25 of 27 bands did not reach the limit",
    );
  });
  it("says below lowest and not assessed with their reasons", () => {
    const below = toBandColumns({
      result: withLimit(1000, { status: "below lowest" }),
      criterion: PAIR,
    });
    const none = toBandColumns({
      result: withLimit(1000, { status: "not assessed", reason: "harmonics above 20 kHz" }),
      criterion: PAIR,
    });
    const words = (set: typeof below): string => {
      const column = set.columns[14];
      return column === undefined ? "" : sayFinding(column, set.levels).replaceAll(NBSP, " ");
    };
    expect(words(below)).toContain("limit below the 76 dB run");
    expect(words(none)).toContain("limit not assessed: harmonics above 20 kHz");
  });
});
