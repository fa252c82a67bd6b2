import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { spreadLabels } from "./labels";

describe("spreadLabels", () => {
  it.each([
    ["leaves free labels alone", [10, 40, 90], 14, [10, 40, 90]],
    ["moves two apart about their middle", [50, 54], 14, [45, 59]],
    ["keeps the order of the wishes", [54, 50], 14, [59, 45]],
    ["shares three on one spot", [50, 50, 50], 10, [40, 50, 60]],
    ["has nothing to do for none", [], 14, []],
  ])("%s", (_, wanted, gap, expected) => expect(spreadLabels(wanted, gap)).toEqual(expected));

  it("keeps to its range", () => {
    expect(spreadLabels([98, 99], 10, 0, 100)).toEqual([90, 100]);
    expect(spreadLabels([1, 2], 10, 0, 100)).toEqual([0, 10]);
  });

  it("shrinks the gap where the range is too short", () => {
    expect(spreadLabels([5, 5, 5], 10, 0, 12)).toEqual([0, 6, 12]);
  });

  it("never lets two labels touch, stays in range, keeps the order", () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -50, max: 600, noNaN: true }), { maxLength: 18 }),
        (wanted) => {
          const placed = spreadLabels(wanted, 14, 0, 500);
          const pairs = wanted.map((at, index) => ({ at, placed: placed[index] ?? Number.NaN }));
          const sorted = pairs.toSorted((a, b) => a.at - b.at || a.placed - b.placed);
          const at = sorted.map((label) => label.placed);
          const gaps = at.slice(1).map((y, index) => y - (at[index] ?? 0));
          expect(Math.min(Infinity, ...at)).toBeGreaterThanOrEqual(-1e-9);
          expect(Math.max(-Infinity, ...at)).toBeLessThanOrEqual(500 + 1e-9);
          expect(Math.min(Infinity, ...gaps)).toBeGreaterThanOrEqual(14 - 1e-6);
        },
      ),
    );
  });
});
