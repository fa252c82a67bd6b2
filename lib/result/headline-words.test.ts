import { describe, expect, it } from "vitest";
import { toHeadlineSentences } from "./headline-words";

const base = {
  criterion: { thd_percent: 10, compression_dB: 3 },
  from_Hz: 80,
  to_Hz: 16000,
  spl_dB: 101,
  at_least: true,
  first: null,
};
const first = {
  status: "found" as const,
  nominal_Hz: 50,
  spl_dB: 93.9,
  nominal_dB: 94.4,
  ceiling: true,
};
const say = (headline: Parameters<typeof toHeadlineSentences>[0]): string =>
  toHeadlineSentences(headline).join(" ").replaceAll("\u00A0", " ");

describe("headline in words", () => {
  it("says what was reached", () => {
    expect(say(base)).toBe("Reached at least 101 dB at 1 m in every band from 80 Hz to 16 kHz.");
    expect(say({ ...base, at_least: false, spl_dB: 98.96 })).toBe(
      "Reached 98 dB at 1 m in every band from 80 Hz to 16 kHz.",
    );
  });

  it.each([
    [first, "At 50 Hz it stops at 93 dB, however far you turn it up (run level 94 dB)."],
    [{ ...first, ceiling: false }, "At 50 Hz it gives out first, at 93 dB (run level 94 dB)."],
    [
      { ...first, status: "below lowest" as const, nominal_dB: 76 },
      "At 50 Hz it was already past its limit at the 76 dB run.",
    ],
    [{ ...first, spl_dB: null }, "At 50 Hz it gives out first (run level 94 dB)."],
  ])("says what gives out first, case %#", (given, expected) => {
    expect(say({ ...base, first: given })).toContain(expected);
  });
});
