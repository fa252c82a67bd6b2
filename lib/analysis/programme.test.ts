/** The two bounds of the programme estimate. */
import { describe, expect, it } from "vitest";
import { thirdOctaves } from "@/lib/analysis/bands";
import type { BandLimit } from "@/lib/analysis/limits";
import { estimateProgramme, type ProgrammeBand } from "@/lib/analysis/programme";
import type { LimitStatus } from "@/lib/series/vocabulary";

/** 20 Hz to 20 kHz: 31 bands. */
const ALL = thirdOctaves(10, 22_400);

const criterion = { compression_dB: 1 };
function bandsWith(limitOf: (nominalHz: number) => [LimitStatus, number]): ProgrammeBand[] {
  return ALL.map((band) => {
    const [status, nominalDb] = limitOf(band.nominalHz);
    const limit: BandLimit = {
      criterion,
      kind: "short-term",
      status,
      nominalDb,
      lowDb: nominalDb,
      highDb: nominalDb,
      splDb: nominalDb,
      boundBy: status === "found" ? "compression" : null,
      reached: status === "found",
      reason: undefined,
    };
    return { band, limit, splGainDb: 0 };
  });
}

describe("programme estimate", () => {
  it("is bound by peaks where every band limits alike: 100 dB + 3.01 - 12", () => {
    const estimate = estimateProgramme(
      "pink",
      12,
      criterion,
      bandsWith(() => ["found", 100]),
      100,
    );
    // The whole drive reaches the loudspeaker flat: SPL is the drive itself.
    expect(estimate.splDb).toBeCloseTo(91.01, 2);
    expect(estimate.splDba).toBeCloseTo(91.01 - 2.98, 1);
    expect(estimate.boundBy).toBe("peak");
    expect(estimate.atLeast).toBe(false);
  });

  it("is bound by a band whose limit is low: 70 dB in one of 31 pink bands", () => {
    const estimate = estimateProgramme(
      "pink",
      12,
      criterion,
      bandsWith((hz) => ["found", hz === 40 ? 70 : 100]),
      100,
    );
    // The band holds 1/31 of the power: the programme is 10 lg 31 louder than its share.
    expect(estimate.splDb).toBeCloseTo(70 + 10 * Math.log10(31), 6);
    expect(estimate.boundBy).toBe("band");
    expect(estimate.firstBandHz).toBe(40);
  });

  it("is at least what was tested where the binding limit was not reached", () => {
    const estimate = estimateProgramme(
      "pink",
      12,
      criterion,
      bandsWith(() => ["not reached", 102]),
      102,
    );
    expect(estimate.atLeast).toBe(true);
    expect(estimate.splDb).toBeCloseTo(93.01, 2);
  });

  it("counts assessed bands only and names them", () => {
    const estimate = estimateProgramme(
      "iec-60268-1",
      12,
      criterion,
      bandsWith((hz) => (hz < 50 || hz > 10_000 ? ["not assessed", Number.NaN] : ["found", 100])),
      100,
    );
    expect([estimate.fromHz, estimate.toHz]).toEqual([50, 10_000]);
    expect(estimate.splDb).toBeCloseTo(91.01, 2);
  });

  it("is refused where a band past its limit at the lowest run binds it", () => {
    const estimate = estimateProgramme(
      "pink",
      12,
      criterion,
      bandsWith((hz) => (hz === 40 ? ["below lowest", 60] : ["found", 100])),
      100,
    );
    expect(estimate.splDb).toBeNaN();
    expect(estimate.refused).toMatch(/lowest run/);
  });

  it("is refused without a headline", () => {
    expect(
      estimateProgramme(
        "pink",
        12,
        criterion,
        bandsWith(() => ["found", 100]),
        null,
      ).refused,
    ).toMatch(/headline/);
  });
});
