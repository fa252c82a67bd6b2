import { describe, expect, it } from "vitest";
import type { Band, BandLevel } from "../result/result-schema";
import { findWorstThd, sayThdBeside } from "./distortion-words";

const level = (thd: number | null, quality: BandLevel["thd_quality"]): BandLevel => ({
  file: "102.wav",
  level_dB: 102,
  kind: "short-term",
  spl_dB: 100,
  expected_dB: 100,
  compression_dB: 0,
  uncertainty_dB: 0.05,
  snr_dB: 50,
  thd_percent: thd,
  thd_quality: quality,
  thd_orders: "2-5",
  harmonics: [],
});

const band = (hz: number, one: BandLevel): Band => ({
  nominal_Hz: hz,
  exact_Hz: hz,
  levels: [one],
  onset: {
    status: "not reached",
    nominal_dB: null,
    low_dB: null,
    high_dB: null,
    spl_dB: null,
    ceiling_dB: null,
  },
  cause: "none",
  cause_inferred: false,
  cause_reason: "",
  evidence: {
    slope: null,
    odd_ratio: null,
    growth_dB: null,
    growth_needed_dB: null,
    law: null,
    law_curve: null,
    next_run: null,
  },
  long_term: [],
  limits: [],
});

const run = { file: "102.wav" };
const bands = [
  band(40, level(3.3, "measured")),
  band(1000, level(null, "noise")),
  band(2000, level(9, "uncertain")),
];
const say = (hz: number | null, from = bands) =>
  sayThdBeside(from, run, hz).replaceAll("\u00A0", " ");

describe("THD beside a small figure", () => {
  it("is the largest measured one where no band is picked", () => {
    expect(findWorstThd(bands, run)).toEqual({ hz: 40, percent: 3.3 });
    expect(say(null)).toBe("THD 3.3 % at 40 Hz");
  });

  it.each([
    [40, "THD 3.3 %"],
    [1000, "THD in the noise"],
    [2000, "THD about 9.0 %"],
  ])("is that of the picked band %d", (hz, expected) => {
    expect(say(hz)).toBe(expected);
  });

  it("says so where nothing of the run is measured", () => {
    expect(say(null, bands.slice(1))).toBe("THD in the noise");
  });
});
