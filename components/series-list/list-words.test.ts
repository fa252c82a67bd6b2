import { toCriterionKey } from "@/lib/result/criteria";
import { describe, expect, it } from "vitest";
import {
  findLimits,
  listCriteria,
  toCriterionShort,
  toCriterionWords,
  toFirstWords,
  toReachedWords,
} from "./list-words";
import { makeLimits, makeRow } from "./row-samples";

const plain = (value: unknown): unknown =>
  JSON.parse(JSON.stringify(value).replaceAll("\u00a0", " "));

describe("criteria", () => {
  it.each([
    [{ thd_percent: 10, compression_dB: 3 }, "thd10-comp3", "THD 10 % or 3 dB"],
    [{ thd_percent: 0.5 }, "thd0.5", "THD 0.5 %"],
    [{ compression_dB: 1 }, "comp1", "compression 1 dB"],
  ])("%o", (criterion, key, short) => {
    expect(toCriterionKey(criterion)).toBe(key);
    expect(plain(toCriterionShort(criterion))).toBe(short);
  });

  it("says which half counts", () => {
    expect(plain(toCriterionWords({ thd_percent: 10, compression_dB: 3 }))).toBe(
      "THD 10 % or compression 3 dB, whichever comes first",
    );
  });

  it("offers the lab's own once, after the usual ones", () => {
    const own = { thd_percent: 5 };
    const rows = [makeRow(), makeRow({ limits: [makeLimits({ criterion: own })] })];
    const keys = listCriteria(rows).map(toCriterionKey);
    expect(keys.filter((key) => key === "thd10-comp3")).toHaveLength(1);
    expect(keys.at(-1)).toBe("thd5");
  });
});

describe("toReachedWords", () => {
  it("rounds the limit down and says at least", () => {
    expect(plain(toReachedWords(makeLimits()))).toEqual({
      words: "at least 101",
      note: "80 Hz to 16 kHz",
    });
  });

  it("says why there is no headline", () => {
    const limits = makeLimits({ headline: null, headline_missing: "under two octaves" });
    expect(toReachedWords(limits)).toEqual({ words: "no headline", note: "under two octaves" });
  });

  it("has nothing to say without an analysis", () => {
    expect(toReachedWords(findLimits(makeRow({ limits: [] }), "thd10-comp3"))).toBeNull();
  });
});

describe("toFirstWords", () => {
  const withFirst = (first: NonNullable<ReturnType<typeof makeLimits>["headline"]>["first"]) => {
    const limits = makeLimits();
    return makeLimits({ headline: limits.headline && { ...limits.headline, first } });
  };

  it("names the band, its limit and the run level", () => {
    expect(plain(toFirstWords(makeRow(), makeLimits()))).toEqual({
      words: "50 Hz at 93 dB",
      note: "run level 96 dB",
    });
  });

  it("says up to which run nothing gave out", () => {
    expect(plain(toFirstWords(makeRow(), withFirst(null)))).toEqual({
      words: "not reached up to",
      note: "the 102 dB run",
    });
  });

  it("says that a band was past it from the start", () => {
    const first = {
      status: "below lowest" as const,
      nominal_Hz: 200,
      spl_dB: 80,
      nominal_dB: 76,
      ceiling: false,
    };
    expect(plain(toFirstWords(makeRow(), withFirst(first)))).toEqual({
      words: "200 Hz, already past it",
      note: "at the 76 dB run",
    });
  });
});
