import { describe, expect, it } from "vitest";
import { makeSampleSnapshot } from "../../tests/support/sample-publication";
import { makeSampleResult } from "../../tests/support/sample-result";
import type { Result } from "../result/result-schema";
import { toComparisonCsv } from "./compare-csv";
import { compareTests } from "./compare-tests";
import {
  toDifferenceCell,
  toDifferenceWords,
  toFirstLines,
  toPartLines,
  toReachedLines,
} from "./compare-words";
import { fromSeries, fromSnapshot } from "./compared-test";
import type { ComparedBand, ComparedTest, Difference } from "./comparison-schema";
import { toDifference, toReach } from "./difference";

const plain = (text: string | null): string | null => text?.replaceAll("\u00a0", " ") ?? null;

type Band = Parameters<typeof toReach>[0];
const found = (splDb: number, over: Partial<Band> = {}): Band => ({
  status: "found",
  spl_dB: splDb,
  nominal_dB: 96,
  low_dB: 96,
  high_dB: 96,
  uncertainty_dB: 0.6,
  ...over,
});
const open = (splDb: number): Band => found(splDb, { status: "not reached" });
const below = (splDb: number): Band => found(splDb, { status: "below lowest" });
const missing: Band = found(0, { status: "not assessed", spl_dB: null });

/** Both carry 0.6 dB: together 0.85 dB. */
const say = (compared: Band, reference: Band): string =>
  toDifferenceCell(toDifference(toReach(compared), toReach(reference)));

describe("difference of two limits", () => {
  it.each([
    // Both reached: the difference, either way, and none under the uncertainty of both.
    ["both reached, louder", found(98), found(94.6), "+3.4"],
    ["both reached, quieter", found(88.2), found(97.8), "\u22129.6"],
    ["both reached, ten and more", found(78), found(94), "\u221216"],
    ["both reached, under the uncertainty", found(94.8), found(94), "no"],
    ["both reached, equal", found(94), found(94), "no"],
    ["both reached, just over it", found(94.9), found(94), "+0.9"],
    // Only the reference reached: louder or more, if this one passed the reference's limit.
    ["only A reached, loudest run above it", open(102.3), found(88.1), "+14\u2026"],
    ["only A reached, a little above it", open(99.06), found(94), "+5.0\u2026"],
    ["only A reached, within the uncertainty", open(94.5), found(94), "\u00b7"],
    ["only A reached, loudest run below it", open(84), found(94), "\u00b7"],
    // Only this one reached: quieter or more, if the reference passed this one's limit.
    ["only B reached, A's loudest run above it", found(94), open(102.46), "\u22128.4\u2026"],
    ["only B reached, within the uncertainty", found(94), open(94.5), "\u00b7"],
    ["only B reached, A's loudest run below it", found(94), open(84), "\u00b7"],
    // None reached: nothing is known, however far apart the loudest runs are.
    ["none reached", open(102), open(84), "\u00b7"],
    // Past it from the start counts the other way round.
    ["B below its lowest run, A reached", below(70), found(94), "\u221224\u2026"],
    ["B below its lowest run, A not reached", below(70), open(102), "\u221232\u2026"],
    ["B reached, A below its lowest run", found(94), below(70), "+24\u2026"],
    ["B not reached, A below its lowest run", open(94), below(70), "+24\u2026"],
    ["B below a lowest run louder than A's limit", below(94), found(90), "\u00b7"],
    ["both below their lowest runs", below(70), below(76), "\u00b7"],
    // What was not assessed tells nothing.
    ["B not assessed", missing, found(94), "\u00b7"],
    ["A not assessed", found(94), missing, "\u00b7"],
  ])("%s", (_, compared, reference, cell) => {
    expect(say(compared, reference)).toBe(cell);
  });

  it("takes a limit between two runs at its lower end, and the step into its uncertainty", () => {
    const bracket = found(87, { nominal_dB: 96, low_dB: 96, high_dB: 102 });
    // The bracketed one may lie 6 dB higher: 5 dB quieter is no difference shown, 7 dB is one.
    expect(say(bracket, found(92))).toBe("no");
    expect(say(bracket, found(94))).toBe("\u22127.0");
    // Louder than the other: being higher still only helps.
    expect(say(bracket, found(86))).toBe("+1.0");
    expect(say(found(92), bracket)).toBe("no");
    expect(say(found(94), bracket)).toBe("+7.0");
  });

  it("takes the interval of the drive from 90 % to k = 2", () => {
    const wide = found(94, { nominal_dB: 96, low_dB: 95, high_dB: 98 });
    const reach = toReach(wide);
    expect(reach?.downDb).toBeCloseTo(Math.hypot(0.6, 1.2158), 3);
    expect(reach?.upDb).toBeCloseTo(Math.hypot(0.6, 2.4316), 3);
  });

  it.each<[Partial<Difference>, boolean, string]>([
    [{ difference_dB: -8.46, or_more: true }, true, "8 or more quieter than A"],
    [{ difference_dB: -8.46, or_more: true }, false, "8.4 dB or more quieter than A"],
    [{ difference_dB: 4.96 }, true, "5 louder than A"],
    [{ shown: "none", difference_dB: null }, true, "no difference shown"],
    [{ shown: "unknown", difference_dB: null }, true, "not known"],
  ])("in words: %o", (over, whole, words) => {
    const difference: Difference = {
      shown: "value",
      difference_dB: 0,
      or_more: false,
      uncertainty_dB: 0.8,
      ...over,
    };
    expect(plain(toDifferenceWords(difference, { than: "A", whole }))).toBe(words);
  });
});

const CRITERION = { compression_dB: 3 };
const JUDGED = { criterion: CRITERION, kind: "short-term" } as const;

function makeTest(
  id: string,
  change: Partial<ComparedTest> = {},
  bands: (band: ComparedBand) => Partial<ComparedBand> = () => ({}),
): ComparedTest {
  const candidate = fromSnapshot(makeSampleSnapshot(), { id, path: `/t/${id}` }, CRITERION);
  if (!("test" in candidate)) throw new Error(candidate.unfit);
  const { test } = candidate;
  return {
    ...test,
    model: id,
    bands: test.bands.map((band) => ({ ...band, ...bands(band) })),
    ...change,
  };
}

const facts = (result: Result | null) => ({
  id: "5f0c2b8e-0000-4000-8000-000000000231",
  number: "S-0231",
  lab: "Reedholm Test Lab",
  loudspeaker: { maker: "Withy Lane", model: "Osier 8A", kind: "active, two-way" },
  result,
  causes: new Map([[50, "port" as const]]),
});

describe("tests side by side", () => {
  it("leaves out another kind of space and says which", () => {
    const comparison = compareTests(
      [
        { test: makeTest("Fennel 5") },
        { test: makeTest("Ketch 12", { environment: "ground-plane" }) },
        { test: makeTest("Gate 4", { environment: "gated" }) },
        { id: "x", maker: "Withy Lane", model: "New", unfit: "It has no analysis yet." },
      ],
      JUDGED,
    );
    expect(comparison.tests.map((test) => test.model)).toEqual(["Fennel 5", "Gate 4"]);
    expect(comparison.left_out).toEqual([
      {
        id: "Ketch 12",
        maker: "Withy Lane",
        model: "Ketch 12",
        why: "It was measured on the ground plane; Fennel 5 in an anechoic room. Only tests in the same kind of space, under the same criterion, stand side by side.",
      },
      { id: "x", maker: "Withy Lane", model: "New", why: "It has no analysis yet." },
    ]);
  });

  it("turns every difference round when the reference is switched", () => {
    const quieter = makeTest("B", {}, (band) => ({ spl_dB: (band.spl_dB ?? 0) - 9 }));
    const [one] = compareTests([{ test: makeTest("A") }, { test: quieter }], JUDGED).tests.slice(1);
    const [other] = compareTests([{ test: quieter }, { test: makeTest("A") }], JUDGED).tests.slice(
      1,
    );
    const at50 = 1;
    expect(one?.differences[at50]).toMatchObject({ shown: "value", or_more: false });
    expect(one?.differences[at50]?.difference_dB).toBeCloseTo(-9, 6);
    expect(other?.differences[at50]?.difference_dB).toBeCloseTo(9, 6);
    // At 1 kHz neither was reached.
    expect(one?.differences[14]?.shown).toBe("unknown");
    expect(compareTests([{ test: quieter }], JUDGED).tests[0]?.differences).toEqual([]);
  });

  it("gathers parts of the sound by their weakest band", () => {
    const weak = makeTest("B", {}, (band) =>
      band.nominal_Hz === 200
        ? { status: "found", spl_dB: 86.4, nominal_dB: 90, low_dB: 89.8, high_dB: 90.2 }
        : {},
    );
    const holed = makeTest("C", {}, (band) =>
      band.nominal_Hz === 200 ? { status: "not assessed", spl_dB: null } : {},
    );
    const past = makeTest("D", {}, (band) =>
      band.nominal_Hz === 200 ? { status: "below lowest", spl_dB: 70 } : {},
    );
    const [a, b, c, d] = compareTests(
      [makeTest("A"), weak, holed, past].map((test) => ({ test })),
      JUDGED,
    ).tests.map((test) => test.parts[1]);
    expect(a).toMatchObject({ name: "Upper bass", at_least: true, difference: null });
    expect(b?.reached_dB).toBe(86.4);
    expect(plain(toPartLines(b!).words)).toBe("86");
    expect(toPartLines(b!).note).toMatch(/^1\d or more quieter$/);
    expect(c?.difference?.shown).toBe("unknown");
    expect(toPartLines(d!)).toMatchObject({ words: "past it from the start" });
    expect(toPartLines(d!).note).toMatch(/^3\d or more quieter$/);
  });

  it("names the band that needs the lowest drive, with the run level", () => {
    const first = (bands: (band: ComparedBand) => Partial<ComparedBand>) => {
      const [test] = compareTests([{ test: makeTest("A", {}, bands) }], JUDGED).tests;
      const lines = toFirstLines(test!);
      return [plain(lines.words), plain(lines.note)];
    };
    expect(first(() => ({}))).toEqual(["50 Hz at 91 dB", "run level 94 dB"]);
    expect(first(() => ({ status: "not reached" }))).toEqual([
      "not reached up to the 102 dB run",
      null,
    ]);
    expect(
      first((band) =>
        band.nominal_Hz === 63
          ? { status: "found", nominal_dB: 86, low_dB: 86, high_dB: 96, spl_dB: 77.4 }
          : { status: "not reached" },
      ),
    ).toEqual(["63 Hz at 77 dB", "from the 86 to the 96 dB run"]);
    expect(
      first((band) => (band.nominal_Hz === 200 ? { status: "below lowest", spl_dB: 70 } : {})),
    ).toEqual(["200 Hz, already past it", "at the 76 dB run"]);
  });

  it("gives the figure of the headline, or why there is none", () => {
    const [test] = compareTests([{ test: makeTest("A") }], JUDGED).tests;
    expect(toReachedLines(test!)).toMatchObject({ words: "101", atLeast: true });
    // A pair that the analysis did not compute as such has no headline of its own: it is composed.
    const result = makeSampleResult();
    result.settings.criteria = [{ thd_percent: 10 }, { compression_dB: 3 }];
    const pair = { criterion: { thd_percent: 10, compression_dB: 3 }, kind: "short-term" } as const;
    const candidate = fromSeries(facts(result), pair);
    expect("test" in candidate && candidate.test.reached).toMatchObject({
      from_Hz: 80,
      at_least: true,
      spl_dB: 99,
    });
    const bare = { ...result, bands: result.bands.slice(0, 3) };
    const narrow = fromSeries(facts(bare), pair);
    expect("test" in narrow && narrow.test.reached).toBeNull();
    expect("test" in narrow && narrow.test.reached_missing).toContain("most bands from 200 Hz");
  });
});

describe("what can be compared", () => {
  const unfit = (result: Result | null, judged: Parameters<typeof fromSeries>[1]) => {
    const candidate = fromSeries(facts(result), judged);
    return "unfit" in candidate ? plain(candidate.unfit) : null;
  };

  it("takes a series under a criterion that its analysis holds, with the causes decided", () => {
    const candidate = fromSeries(facts(makeSampleResult()), JUDGED);
    expect("test" in candidate && candidate.test.bands[1]).toMatchObject({
      nominal_Hz: 50,
      status: "found",
      cause: "port",
    });
    expect("test" in candidate && candidate.test.levels_dB).toEqual([76, 86, 96, 102]);
  });

  it("takes the uncertainty that the test states, and the usual one where it states none", () => {
    const result = makeSampleResult();
    const stated = {
      ...result,
      bands: result.bands.map((band) => ({
        ...band,
        spl_uncertainty: { expanded_dB: 0.7, parts: [] },
      })),
    };
    const [none, own] = [result, stated].map((one) => fromSeries(facts(one), JUDGED));
    expect(
      none && "test" in none && [none.test.uncertainty_assumed, none.test.bands[0]?.uncertainty_dB],
    ).toEqual([true, 1]);
    expect(
      own && "test" in own && [own.test.uncertainty_assumed, own.test.bands[0]?.uncertainty_dB],
    ).toEqual([false, 0.7]);
  });

  it.each([
    ["no analysis", null, JUDGED, "It has no analysis yet."],
    [
      "a criterion that was not judged",
      makeSampleResult(),
      { ...JUDGED, criterion: { compression_dB: 2 } },
      "Its analysis did not judge by compression 2 dB. Add the criterion and analyse it again.",
    ],
    [
      "no long-term runs",
      { ...makeSampleResult(), runs: [] },
      { ...JUDGED, kind: "long-term" as const },
      "It has no long-term runs.",
    ],
    [
      "levels that do not hold",
      { ...makeSampleResult(), spl_valid: false, environment: "in-room" },
      JUDGED,
      "Levels in dB SPL do not hold where it was measured (in a room), so its limits cannot be compared.",
    ],
  ])("says why not: %s", (_, result, judged, words) => {
    expect(unfit(result, judged)).toBe(words);
  });

  it("refuses a publication signed for another criterion", () => {
    const candidate = fromSnapshot(
      makeSampleSnapshot(),
      { id: "a/b", path: "/t/a/b" },
      {
        thd_percent: 10,
        compression_dB: 3,
      },
    );
    expect("unfit" in candidate && plain(candidate.unfit)).toBe(
      "Its limit is 3 dB compression; here the limit is 10 % distortion or 3 dB compression. Only tests in the same kind of space, under the same criterion, stand side by side.",
    );
  });
});

describe("the file", () => {
  const b = makeTest("B", {}, (band) => ({ spl_dB: (band.spl_dB ?? 0) - 9 }));
  const lines = toComparisonCsv(compareTests([{ test: makeTest("A") }, { test: b }], JUDGED)).split(
    "\r\n",
  );

  it("carries method, notice, tests and the way of counting before the head", () => {
    expect(lines[0]).toContain(
      "Sine sweep, one tone at a time, unweighted; limit: compression 3 dB",
    );
    expect(lines[1]).toContain("WARNING: Up to 104 dB at 1 m: not without hearing protection.");
    expect(lines[2]).toContain("A: Withy Lane A, S-0231");
    expect(lines[4]).toContain("A limit that lies between two runs counts at its lower end.");
    expect(lines[5]).toMatch(/^"?band, Hz/);
  });

  it("has one row per band", () => {
    expect(lines).toHaveLength(6 + 27 + 1);
    const at50 = lines.find((line) => line.startsWith("50,"))?.split(",");
    expect(at50?.[2]).toBe("found");
    expect(at50?.[7]).toBe("-9");
    expect(at50?.[8]).toBe("quieter");
    expect(lines.find((line) => line.startsWith("1000,"))).toContain("not known");
  });
});
