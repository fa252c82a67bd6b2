import { describe, expect, it } from "vitest";
import { planSchema } from "@/lib/series/plan-schema";
import { parseNumber, planFormSchema, sayPlanFault } from "./plan-form-schema";
import { suggestLevel, usualLevels, withLongTermRun } from "./plan-levels";

describe("parseNumber", () => {
  it.each([
    ["1.5", 1.5],
    ["1,5", 1.5],
    ["20 000", 20_000],
    ["20\u2009000", 20_000],
    ["\u22129", -9],
    [".5", 0.5],
    ["", null],
    ["  ", null],
    [null, null],
    [3, 3],
  ])("%j", (text, expected) => {
    expect(parseNumber(text)).toBe(expected);
  });

  it.each(["1,000.5x", "abc", "1e3", "--1", "1.2.3"])("%j is no number", (text) => {
    expect(parseNumber(text)).toBeNaN();
  });
});

describe("faults of the plan form", () => {
  const loudspeaker = { maker: "Withy Lane", model: "Osier 5A", kind: "active, two-way" as const };
  const toFaults = (plan: unknown, given: unknown = loudspeaker): Record<string, string> => {
    const parsed = planFormSchema.safeParse(
      { loudspeakerId: "new", loudspeaker: given, plan },
      { error: sayPlanFault },
    );
    return Object.fromEntries(
      parsed.error?.issues.map((issue) => [issue.path.join("."), issue.message]) ?? [],
    );
  };

  it("takes the usual plan", () => {
    expect(toFaults({})).toEqual({});
  });

  it.each([
    [{ place: { distance_m: 0 } }, "plan.place.distance_m", "Distance must be from 0.25 to 10 m."],
    [{ place: { distance_m: null } }, "plan.place.distance_m", "Enter a number."],
    [
      { place: { distance_m: Number.NaN } },
      "plan.place.distance_m",
      "Enter a number, such as 1.5.",
    ],
    [{ sweep: { length_s: 0 } }, "plan.sweep.length_s", "Must be 1\u00a0s or more."],
    [{ sweep: { length_s: 61 } }, "plan.sweep.length_s", "Must be 60\u00a0s or less."],
    [
      { place: { temperature_C: -40 } },
      "plan.place.temperature_C",
      "Must be \u221220\u00a0°C or more.",
    ],
    [{ place: { environment: "gated" } }, "plan.place.gate_ms", "Enter the gate."],
    [{ state: { preset: "x".repeat(81) } }, "plan.state.preset", "At most 80 characters."],
    [
      { calibration: { by: "sensitivity" } },
      "plan.calibration.full_scale_dB",
      "Enter the level of digital full scale.",
    ],
    [
      { levels: [{ level_dB: 76 }, { level_dB: 76 }] },
      "plan.levels",
      "Two levels are the same. Plan a repeat instead.",
    ],
    [
      { levels: [{ level_dB: 20 }, { level_dB: 76 }] },
      "plan.levels.0.level_dB",
      "Must be 40\u00a0dB or more.",
    ],
  ])("%j", (plan, path, message) => {
    expect(toFaults(plan)[path]).toBe(message);
  });

  it("asks for maker and model in words", () => {
    const faults = toFaults({}, { maker: " ", model: "", kind: "other" });
    expect(faults["loudspeaker.maker"]).toBe("Enter the maker.");
    expect(faults["loudspeaker.model"]).toBe("Enter the model.");
  });
});

describe("levels", () => {
  const at = (...levels: number[]) =>
    levels.map((level_dB) => ({ level_dB, long_term: false, repeats: 0 }));

  it.each([
    ["the middle of the first widest gap", usualLevels(), 81],
    ["a step above the top where no gap is wide", at(76, 81, 86), 89],
    ["the lowest of the usual plan where there is none", [], 76],
  ])("suggests %s", (_name, levels, expected) => {
    expect(suggestLevel(levels)?.level_dB).toBe(expected);
  });

  it("suggests none above the loudest that may be planned", () => {
    expect(suggestLevel(at(126, 130))).toBeNull();
  });

  it("gives the loudest level its long-term run, then the next", () => {
    const once = withLongTermRun(at(76, 102, 96));
    expect(once?.filter((l) => l.long_term).map((l) => l.level_dB)).toEqual([102]);
    const twice = once && withLongTermRun(once);
    expect(twice?.filter((l) => l.long_term).map((l) => l.level_dB)).toEqual([102, 96]);
    expect(withLongTermRun([])).toBeNull();
  });

  it("keeps the usual plan what the schema takes it for", () => {
    expect(planSchema.parse({}).levels).toEqual(usualLevels());
  });
});
