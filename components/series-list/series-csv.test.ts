import { describe, expect, it } from "vitest";
import { makeRow } from "./row-samples";
import { toLoudestLevel, toSeriesCsv } from "./series-csv";

const criterion = { thd_percent: 10, compression_dB: 3 };

describe("toSeriesCsv", () => {
  const lines = toSeriesCsv([makeRow()], criterion).split("\r\n");

  it("carries the method and the hearing notice before the head", () => {
    expect(lines[0]).toContain("Sine sweep, one tone at a time, unweighted");
    expect(lines[0]).toContain("THD 10 % or compression 3 dB");
    expect(lines[1]).toContain("WARNING: Up to 104 dB at 1 m: not without hearing protection.");
    expect(lines[2]?.startsWith("series,maker,model")).toBe(true);
  });

  it("gives the figures of the row, limits rounded down", () => {
    expect(lines[3]).toBe(
      'S-0231,Withy Lane,Osier 8A,"active, two-way",0417,in review,76 86 96 102,101,yes,80,16000,50,93,96,limiter,2026-05-12T08:42:00.000Z',
    );
  });

  it("leaves cells empty where there are no limits, and no notice where there is no level", () => {
    const bare = toSeriesCsv([makeRow({ limits: [], max_level_dB: null })], criterion).split(
      "\r\n",
    );
    expect(bare[1]?.startsWith("series,")).toBe(true);
    expect(bare[2]).toContain(",76 86 96 102,,,,,,,,,");
  });

  it("keeps a maker's name from being taken for a formula", () => {
    const row = makeRow();
    const csv = toSeriesCsv(
      [{ ...row, loudspeaker: { ...row.loudspeaker, maker: '=HYPERLINK("x")' } }],
      criterion,
    );
    expect(csv).toContain(`"'=HYPERLINK(""x"")"`);
  });
});

describe("toLoudestLevel", () => {
  it("is the loudest of the shown rows", () => {
    expect(toLoudestLevel([makeRow({ max_level_dB: 99 }), makeRow({ max_level_dB: null })])).toBe(
      99,
    );
    expect(toLoudestLevel([])).toBeNull();
  });
});
