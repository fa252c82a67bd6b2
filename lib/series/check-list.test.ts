import { describe, expect, it } from "vitest";
import { toCheckList } from "./check-list";
import { planSchema, type PlanInput } from "./plan-schema";

const toLines = (input: PlanInput): string[] =>
  toCheckList(planSchema.parse(input)).map((line) => line.replaceAll("\u00a0", " "));

describe("toCheckList", () => {
  it("follows the usual plan from calibrator to calibrator", () => {
    expect(toLines({})).toEqual([
      "Calibrator on the microphone: 94 dB, 1 kHz, 15 s",
      "Room noise, 30 s, nothing playing",
      "Gain set once on the 76 dB file: reads 76 dB",
      "Levels upwards; wait for each check",
      "Stop at 30 % THD or 6 dB compression",
      "Closing repeat of 76 dB, then calibrator again",
    ]);
  });

  it("names conditioning and variants where they are planned", () => {
    const lines = toLines({
      levels: [
        { level_dB: 102, long_term: true },
        { level_dB: 82.5, long_term: false },
      ],
      variants: [{ text: "port blocked", level_dB: 82.5 }],
    });
    expect(lines).toContain("Gain set once on the 82.5 dB file: reads 82.5 dB");
    expect(lines).toContain("82.5 dB again, port blocked");
    expect(lines).toContain("102 dB: condition 10 min, stay there, sweep within 0.5 s");
  });

  it("asks for no calibrator with a known sensitivity", () => {
    const lines = toLines({
      calibration: { by: "sensitivity", full_scale_dB: 124 },
      ambient: false,
      closing: false,
    });
    expect(lines.some((line) => line.includes("alibrator"))).toBe(false);
    expect(lines).toHaveLength(3);
  });

  it("ends with the calibrator where there is no closing repeat", () => {
    expect(toLines({ closing: false }).at(-1)).toBe("Calibrator again");
  });
});
