import { describe, expect, it } from "vitest";
import {
  isDistortionOnly,
  toEvidenceLines,
  toFindingSentence,
  toLimitWords,
  toLongTermSentences,
  toNextRunSentence,
  toWidthSentence,
  toShapeSentence,
  toThdWords,
} from "./finding";
import type { Band, BandLevel, Limit } from "./result-schema";

const level = (levelDb: number, splDb: number, lossDb: number): BandLevel => ({
  file: `${levelDb}.wav`,
  level_dB: levelDb,
  kind: "short-term",
  spl_dB: splDb,
  expected_dB: splDb + lossDb,
  compression_dB: lossDb,
  uncertainty_dB: 0.04,
  snr_dB: 50,
  thd_percent: 1.4,
  thd_quality: "measured",
  thd_orders: "2-7",
  harmonics: [],
});

const band = (changes: Partial<Band>): Band => ({
  nominal_Hz: 63,
  exact_Hz: 63.0957,
  levels: [level(76, 76.2, 0), level(86, 86.2, 0), level(96, 93.9, 2.3), level(102, 94.5, 7.7)],
  onset: {
    status: "found",
    nominal_dB: 92.6,
    low_dB: 91.9,
    high_dB: 93.2,
    spl_dB: 92.8,
    ceiling_dB: 94.5,
  },
  cause: "limiter",
  cause_inferred: false,
  cause_reason: "",
  evidence: {
    slope: 0.1,
    odd_ratio: 0.03,
    growth_dB: 0.1,
    growth_needed_dB: 1,
    law: "hard limiter",
    law_curve: null,
    next_run: null,
  },
  long_term: [],
  limits: [],
  ...changes,
});

/** Words as a reader sees them: non-breaking spaces read as spaces. */
const plain = (text: string): string => text.replaceAll("\u00A0", " ");
const say = (changes: Partial<Band>): string =>
  plain(
    toFindingSentence(band(changes))
      .map((segment) => segment.text)
      .join(""),
  );

const onset = (status: Band["onset"]["status"], reason?: string): Band["onset"] => ({
  status,
  nominal_dB: null,
  low_dB: null,
  high_dB: null,
  spl_dB: null,
  ceiling_dB: null,
  reason,
});

describe("finding of a band", () => {
  it.each([
    [
      "an onset with what the last decibels of drive gave",
      {},
      "Output begins to fall behind at 92.8 dB (90 % interval 92.1 to 93.4), at run level 92.6 dB. To the 102 dB run, 9.4 dB more drive gave 1.7 dB more sound.",
    ],
    [
      "an output that falls",
      { levels: [level(76, 76, 0), level(102, 92.1, 9.9)] },
      "Output begins to fall behind at 92.8 dB (90 % interval 92.1 to 93.4), at run level 92.6 dB. To the 102 dB run, 9.4 dB more drive gave 0.7 dB less sound.",
    ],
    [
      "not reached, without a loss worth naming",
      { onset: onset("not reached"), levels: [level(76, 76, 0), level(102, 102, 0.01)] },
      "Output follows the input up to the 102 dB run: the onset was not reached.",
    ],
    [
      "not reached, with a small loss",
      { onset: onset("not reached"), levels: [level(76, 76, 0), level(102, 101.8, 0.2)] },
      "Output follows the input up to the 102 dB run: the onset was not reached. The loss there is +0.20 dB, under the 1/3 dB that counts as onset.",
    ],
    [
      "past it from the lowest run on",
      { onset: onset("below lowest") },
      "Already past it at the 76 dB run: even the lowest run is compressed, so the losses here are lower bounds.",
    ],
    [
      "unresolved, with the reason",
      { onset: onset("unresolved", "one active run lost under 1 dB") },
      "The onset is unresolved: one active run lost under 1 dB.",
    ],
  ] satisfies [string, Partial<Band>, string][])("says %s", (_name, changes, expected) => {
    expect(say(changes)).toBe(expected);
  });

  it("leaves variant runs out of the sentence", () => {
    const levels = [
      level(76, 76, 0),
      level(102, 94.5, 7.7),
      { ...level(104, 80, 20), variant: "port blocked" },
    ];
    expect(say({ levels })).toContain("To the 102 dB run");
  });
});

describe("evidence", () => {
  it("states slope and both questions with what they mean", () => {
    const lines = toEvidenceLines(band({}));
    expect(lines.map((line) => line.means)).toEqual([
      "a ceiling",
      "too few for an overload (0.20)",
      "follows the output (1.0\u00A0dB needed)",
      "",
    ]);
  });

  it("calls an overload what passes both questions", () => {
    const evidence = { ...band({}).evidence, odd_ratio: 0.5, growth_dB: 6, growth_needed_dB: 1 };
    const means = toEvidenceLines(band({ evidence })).map((line) => line.means);
    expect(means[1]).toBe("enough for an overload (0.20)");
    expect(means[2]).toContain("grows like an overload");
  });

  it("proposes the next run only where one helps", () => {
    expect(toNextRunSentence(band({}))).toBeNull();
    const next_run = { level_dB: 91, width_now_dB: 2.5, width_expected_dB: 0.9 };
    const sentence = toNextRunSentence(band({ evidence: { ...band({}).evidence, next_run } }));
    expect(plain(sentence ?? "")).toBe(
      "A run at 91 dB would narrow this interval from 2.5 to about 0.9 dB.",
    );
  });

  it("says how wide the interval would be after a run at another level, where that was weighed", () => {
    const candidates = [
      { level_dB: 90, width_expected_dB: 1.24 },
      { level_dB: 91, width_expected_dB: 0.9 },
    ];
    const next_run = { level_dB: 91, width_now_dB: 2.5, width_expected_dB: 0.9, candidates };
    const weighed = band({ evidence: { ...band({}).evidence, next_run } });
    expect(plain(toWidthSentence(weighed, 90) ?? "")).toBe(
      "After a run at 90 dB the interval would be about 1.2 dB wide; it is 2.5 now.",
    );
    expect(toWidthSentence(weighed, 70)).toBeNull();
    expect(toWidthSentence(band({}), 90)).toBeNull();
  });
});

describe("limits in words", () => {
  const limit = (changes: Partial<Limit>): Limit => ({
    criterion: { thd_percent: 10, compression_dB: 3 },
    kind: "short-term",
    status: "found",
    nominal_dB: 97,
    low_dB: 96.4,
    high_dB: 97.6,
    spl_dB: 94,
    bound_by: "compression",
    reached: true,
    ...changes,
  });

  it.each([
    [limit({}), "limit 94.0 dB, set by compression"],
    [limit({ bound_by: "thd" }), "limit 94.0 dB, set by THD"],
    [
      limit({ status: "not reached", spl_dB: 102.7 }),
      "at least 102.7 dB; not reached up to the 102 dB run",
    ],
    [limit({ status: "below lowest" }), "below the 76 dB run"],
    [
      limit({ status: "not assessed", reason: "harmonics above 20 kHz" }),
      "not assessed: harmonics above 20 kHz",
    ],
    [null, "no limit for this criterion"],
  ])("case %#", (input, expected) => {
    expect(plain(toLimitWords(input, 102, 76))).toBe(expected);
  });

  it("calls it distortion only where THD alone sets the limit and nothing is lost", () => {
    expect(isDistortionOnly(band({ cause: "none" }), limit({ bound_by: "thd" }))).toBe(true);
    expect(isDistortionOnly(band({ cause: "none" }), limit({}))).toBe(false);
    expect(isDistortionOnly(band({}), limit({ bound_by: "thd" }))).toBe(false);
  });
});

describe("long-term loss, shape and THD in words", () => {
  it("says both long-term figures, and where one is a lower bound", () => {
    const long_term: Band["long_term"] = [
      {
        level_dB: 102,
        total_dB: 2.41,
        thermal_dB: 0.29,
        uncertainty_dB: 0.03,
        lower_bound: true,
        cause: "thermal",
      },
    ];
    expect(toLongTermSentences(band({ long_term })).map(plain)).toEqual([
      "102 dB long-term run: at least +2.41 dB lost, at least +0.29 dB of it came with time (± 0.03 dB).",
    ]);
  });

  it("keeps the broadband loss and the local excess apart", () => {
    const shape = {
      level_dB: 102,
      kind: "short-term",
      broadband_dB: 0.8,
      excess_dB: 7.4,
      excess_Hz: 50,
    };
    expect(plain(toShapeSentence(shape))).toBe(
      "102 dB short-term run: +0.8 dB on average over the bands, most at 50 Hz, +7.4 dB beyond that.",
    );
  });

  it("never lets an uncertain THD look certain", () => {
    expect(plain(toThdWords(level(96, 96, 0)))).toBe("1.4 % (H2–H7)");
    expect(plain(toThdWords({ ...level(96, 96, 0), thd_quality: "uncertain" }))).toBe(
      "about 1.4 % (H2–H7), near the noise",
    );
    expect(toThdWords({ ...level(96, 96, 0), thd_percent: null, thd_quality: "noise" })).toBe(
      "in the noise",
    );
  });
});
