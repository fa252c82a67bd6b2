import { describe, expect, it } from "vitest";
import { makeSampleSnapshot } from "../../tests/support/sample-publication";
import { digestText, toSnapshotText } from "../publication/canonical";
import type { Snapshot } from "../publication/snapshot-schema";
import { parseCsv, toCsvLine } from "./csv";
import {
  parseValuesCsv,
  parseValuesJson,
  toValuesCsv,
  toValuesJson,
  type ValuesInput,
} from "./values";

const snapshot = makeSampleSnapshot();
const text = toSnapshotText(snapshot);
const inputOf = (of: Snapshot): ValuesInput => ({
  snapshot: of,
  standing: { state: "live", replacedBy: null, withdrawn: null, timeZone: "UTC" },
  digest: digestText(toSnapshotText(of)),
  page: "https://tests.example/t/reedholm/osier-8a/1",
});

describe("values as CSV", () => {
  it("come back as they were, every one", () => {
    expect(parseValuesCsv(toValuesCsv(inputOf(snapshot)))).toEqual(snapshot.bands);
  });

  it("come back with repeats, missing runs, commas and what looks like a formula", () => {
    const [first, second, ...rest] = snapshot.bands;
    if (first === undefined || second === undefined) throw new Error("two bands are needed");
    const odd: Snapshot = {
      ...snapshot,
      bands: [
        {
          ...first,
          cause_reason: '=1+1, "so"\nit goes',
          levels: [...first.levels, ...first.levels],
        },
        { ...second, cause_reason: "-", levels: second.levels.slice(1), long_term: [] },
        ...rest.map((band) => ({ ...band, cause_reason: "" })),
      ],
    };
    const csv = toValuesCsv(inputOf(odd));
    expect(csv).toContain("'=1+1");
    const back = parseValuesCsv(csv);
    expect(back[0]?.cause_reason).toBe('=1+1, "so"\nit goes');
    expect(back).toEqual(odd.bands);
  });

  it("come back from before levels had an uncertainty of their own", () => {
    const older: Snapshot = {
      ...snapshot,
      bands: snapshot.bands.map((band) => {
        const { spl_uncertainty_dB: known, ...rest } = band;
        expect(known).toBeDefined();
        return rest;
      }),
    };
    const csv = toValuesCsv(inputOf(older));
    expect(csv).not.toContain("spl_uncertainty_dB");
    expect(parseValuesCsv(csv)).toStrictEqual(older.bands);
  });

  it("carry distance, weighting, criterion, method and the hearing notice", () => {
    const csv = toValuesCsv(inputOf(snapshot));
    const comments = csv.split("\r\n").filter((line) => line.startsWith("# "));
    const words = comments.join("\n");
    expect(words).toContain("dB SPL at 1 m, unweighted (Z); limit: 3 dB compression");
    expect(words).toContain("one tone at a time");
    expect(words).toContain("WARNING.");
    expect(words).toContain("https://tests.example/t/reedholm/osier-8a/1 SHA-256 ");
    expect(csv.split("\r\n").filter((line) => line !== "")).toHaveLength(comments.length + 28);
  });
});

describe("values from a space without absolute levels", () => {
  it("say so, and come back as they were", () => {
    const relative: Snapshot = {
      ...snapshot,
      spl_valid: false,
      bands: snapshot.bands.map((band) => ({
        ...band,
        limit: { ...band.limit, spl_dB: null },
        levels: band.levels.map((level) => ({ ...level, spl_dB: null, expected_dB: null })),
      })),
    };
    const csv = toValuesCsv(inputOf(relative));
    expect(csv).toContain("no absolute level holds in this space");
    expect(csv).not.toContain("dB SPL at 1 m");
    expect(parseValuesCsv(csv)).toEqual(relative.bands);
  });
});

describe("values as JSON", () => {
  it("hold the kept text byte for byte, under its digest", () => {
    const json = toValuesJson(inputOf(snapshot), text);
    const kept = json.slice(json.indexOf('"publication":') + 14, json.lastIndexOf("}"));
    const back = parseValuesJson(json);
    expect(digestText(kept)).toBe(back.digest);
    expect(back.publication).toEqual(snapshot);
  });

  it("carry distance, weighting, criterion, method and the hearing notice", () => {
    const values = parseValuesJson(toValuesJson(inputOf(snapshot), text));
    expect(values).toMatchObject({
      distance_m: 1,
      weighting: "unweighted (Z)",
      criterion: "3 dB compression",
      notice: { signal: "WARNING" },
    });
    expect(values.method).toContain("Sine sweep, one tone at a time");
    expect(values.notice?.text).toContain("hearing protection");
  });
});

describe("csv", () => {
  it.each([
    [["a", "b,c", 'd"e', "", "f\ng"]],
    [["=x", "+1", "-3.5", "'=y", "@z", "-1e-3"]],
    [["", ""]],
  ])("%j", (cells) => {
    expect(parseCsv(`${toCsvLine(cells)}\r\n`)).toEqual([cells]);
  });

  it("leaves numbers alone and marks formulas", () => {
    expect(toCsvLine(["-3.5", "=x", "-x"])).toBe("-3.5,'=x,'-x");
  });
});
