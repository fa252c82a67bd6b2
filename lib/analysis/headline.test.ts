import { describe, expect, it } from "vitest";
import { thirdOctaves } from "./bands";
import { composeHeadline, type Headline, type HeadlineBand } from "./headline";
import type { LimitStatus } from "../series/vocabulary";

const criterion = { compression_dB: 3 };
const BANDS = thirdOctaves(20, 20_000);
type Answer = readonly [LimitStatus, number, number?];

/** Limits by nominal frequency: status, SPL, drive (SPL where left out). */
function bandsWith(limitOf: (nominalHz: number) => Answer, ceiling = false): HeadlineBand[] {
  return BANDS.map((band) => {
    const [status, splDb, driveDb] = limitOf(band.nominalHz);
    const nominalDb = driveDb ?? splDb;
    return {
      band,
      ceiling,
      limit: {
        criterion,
        kind: "short-term",
        status,
        nominalDb,
        lowDb: nominalDb,
        highDb: nominalDb,
        splDb,
        boundBy: status === "found" ? "compression" : null,
        reached: status !== "not reached",
        reason: undefined,
      },
    };
  });
}

function headlineOf(bands: HeadlineBand[]): Headline {
  const result = composeHeadline(criterion, bands);
  if (!("headline" in result)) throw new Error(result.refused);
  return result.headline;
}
const refusalOf = (bands: HeadlineBand[]): string => {
  const result = composeHeadline(criterion, bands);
  return "refused" in result ? result.refused : "";
};

describe("composeHeadline", () => {
  it("says the sentence of docs/domain.md: at least 101 dB from 80 Hz to 16 kHz, 93 dB at 50 Hz", () => {
    const headline = headlineOf(
      bandsWith((hz) => {
        if (hz === 50) return ["found", 93.4, 94];
        if (hz < 80) return ["found", 97, 96];
        return ["not reached", hz === 1000 ? 101.3 : 102.6, 102];
      }, true),
    );
    expect(headline).toMatchObject({ fromHz: 80, toHz: 16_000, splDb: 101, atLeast: true });
    expect(headline.first).toEqual({
      status: "found",
      nominalHz: 50,
      splDb: 93.4,
      nominalDb: 94,
      ceiling: true,
    });
  });

  it("rounds down, never up", () => {
    expect(headlineOf(bandsWith(() => ["found", 100.99])).splDb).toBe(100);
    expect(headlineOf(bandsWith(() => ["found", 101])).splDb).toBe(101);
  });

  it("is no 'at least' where the lowest limit of the range was found", () => {
    const headline = headlineOf(
      bandsWith((hz) => (hz === 400 ? ["found", 100.2] : ["not reached", 102])),
    );
    expect(headline).toMatchObject({ splDb: 100, atLeast: false });
  });

  it("names bands that are already past it before any other", () => {
    const headline = headlineOf(
      bandsWith((hz) =>
        hz === 63 ? ["below lowest", 70, 76] : hz === 40 ? ["found", 60, 65] : ["not reached", 102],
      ),
    );
    expect(headline.first).toMatchObject({ status: "below lowest", nominalHz: 63, splDb: 70 });
    expect(headline.fromHz).toBe(80);
  });

  it("takes the found limit with the lowest drive, not the lowest SPL", () => {
    const headline = headlineOf(
      bandsWith((hz) =>
        hz === 50 ? ["found", 80, 95] : hz === 63 ? ["found", 90, 91] : ["not reached", 102],
      ),
    );
    expect(headline.first?.nominalHz).toBe(63);
  });

  it("breaks the range at a band that was not assessed", () => {
    const headline = headlineOf(
      bandsWith((hz) => (hz === 630 ? ["not assessed", Number.NaN] : ["not reached", 102])),
    );
    // 800 Hz to 16 kHz are 14 bands, 40 to 500 Hz are 12.
    expect(headline).toMatchObject({ fromHz: 800, toHz: 16_000, first: null });
  });

  it("is refused, with the reason, where it would mislead", () => {
    expect(refusalOf(bandsWith(() => ["not assessed", Number.NaN]))).toContain("no band");
    expect(refusalOf(bandsWith(() => ["not reached", Number.NaN, 102]))).toContain("not valid");
    expect(
      refusalOf(bandsWith((hz) => (hz > 400 ? ["not assessed", Number.NaN] : ["found", 100]))),
    ).toContain("200 Hz to 5 kHz");
    // Every fifth band 10 dB down: no six neighbours in a row.
    const torn = bandsWith((hz) =>
      BANDS.findIndex(({ nominalHz }) => nominalHz === hz) % 5 === 0
        ? ["found", 90]
        : ["found", 100],
    );
    expect(refusalOf(torn)).toContain("two octaves");
  });
});
