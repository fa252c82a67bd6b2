import { describe, expect, it } from "vitest";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { defaultCriterion, listCriterionParts, readCriterion, sayCriterion } from "./criteria";

const usual = listCriterionParts(DEFAULT_CRITERIA);

describe("criteria on offer", () => {
  it("lists each half once, rising", () => {
    expect(
      listCriterionParts([
        { thd_percent: 10, compression_dB: 3 },
        { thd_percent: 3 },
        { compression_dB: 3 },
      ]),
    ).toEqual({ thdPercents: [3, 10], compressionDbs: [3] });
  });

  it("starts with THD 10 % or 3 dB, else with the laxest there is", () => {
    expect(defaultCriterion(usual)).toEqual({ thd_percent: 10, compression_dB: 3 });
    expect(defaultCriterion({ thdPercents: [1, 5], compressionDbs: [] })).toEqual({
      thd_percent: 5,
    });
  });

  it.each([
    ["nothing named", { thd: null, compression: null }, { thd_percent: 10, compression_dB: 3 }],
    ["both named", { thd: "3", compression: "1" }, { thd_percent: 3, compression_dB: 1 }],
    ["one off", { thd: "off", compression: "1" }, { compression_dB: 1 }],
    ["both off", { thd: "off", compression: "off" }, { thd_percent: 10, compression_dB: 3 }],
    ["not on offer", { thd: "7", compression: "x" }, { thd_percent: 10, compression_dB: 3 }],
  ])("reads an address with %s", (_name, address, expected) => {
    expect(readCriterion(usual, address)).toEqual(expected);
  });

  it("says a criterion in the trade's words", () => {
    const say = (criterion: Parameters<typeof sayCriterion>[0]) =>
      sayCriterion(criterion).replaceAll("\u00A0", " ");
    expect(say({ thd_percent: 10, compression_dB: 3 })).toBe("THD 10 % or compression 3 dB");
    expect(say({ compression_dB: 1 })).toBe("compression 1 dB");
  });
});
