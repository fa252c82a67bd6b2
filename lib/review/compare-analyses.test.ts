import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import type { Band, Result } from "../result/result-schema";
import { compareResults } from "./compare-analyses";
import { listPublishedChanges } from "./engine-changes";
import type { Decision } from "./review-schema";

const before = makeSampleResult();
const criterion = { compression_dB: 3 };

const decided = (nominal_Hz: number, computed_cause: Decision["computed_cause"]): Decision => ({
  nominal_Hz,
  version: 1,
  cause: computed_cause,
  computed_cause,
  changed: false,
  reason: null,
  by: { id: "5c1e7c52-0000-4000-8000-000000000001", name: "T. Reith" },
  at: "2026-05-11T09:14:00.000Z",
});

/** The same analysis with one band made otherwise. */
function withBand(hz: number, change: (band: Band) => Partial<Band>): Result {
  const result = makeSampleResult();
  return {
    ...result,
    bands: result.bands.map((band) =>
      band.nominal_Hz === hz ? { ...band, ...change(band) } : band,
    ),
  };
}
const at63 = (after: Result, decisions: Decision[] = [decided(63, "limiter")]) =>
  compareResults(before, after, criterion, decisions).find((one) => one.nominal_Hz === 63);
const movedOnset = (byDb: number) =>
  withBand(63, ({ onset }) => ({
    onset: { ...onset, nominal_dB: (onset.nominal_dB ?? 0) + byDb },
  }));

describe("compareResults", () => {
  it("finds nothing changed in the same result, and keeps what was decided", () => {
    const changes = compareResults(before, makeSampleResult(), criterion, [decided(63, "limiter")]);
    expect(changes).toHaveLength(before.bands.length);
    expect(changes.filter((one) => one.changed)).toEqual([]);
    expect(changes.filter((one) => one.keeps_decision).map((one) => one.nominal_Hz)).toEqual([63]);
  });

  // The sample's interval at 63 Hz reaches from 0.7 dB below to 0.6 dB above.
  it.each([
    ["by less than is printed", 0.001, false, true],
    ["within its interval", 0.5, true, true],
    ["above its interval", 0.9, true, false],
    ["below its interval", -0.9, true, false],
  ])("an onset that moved %s", (_name, byDb, changed, keeps) => {
    expect(at63(movedOnset(byDb))).toMatchObject({ changed, keeps_decision: keeps });
  });

  it("keeps no decision on another cause, another kind of limit, or an open band", () => {
    expect(at63(withBand(63, () => ({ cause: "overload" })))).toMatchObject({
      cause: { before: "limiter", after: "overload" },
      changed: true,
      keeps_decision: false,
    });
    const unlimited = withBand(63, ({ limits }) => ({
      limits: limits.map((limit) => ({ ...limit, status: "not reached" as const })),
    }));
    expect(at63(unlimited)).toMatchObject({ changed: true, keeps_decision: false });
    expect(at63(makeSampleResult(), [])).toMatchObject({ decision: null, keeps_decision: false });
    const opened = { ...decided(63, "limiter"), cause: null };
    expect(at63(makeSampleResult(), [opened])?.keeps_decision).toBe(false);
  });
});

describe("listPublishedChanges", () => {
  const published = {
    criterion,
    bands: before.bands.map((band) => ({
      nominal_Hz: band.nominal_Hz,
      limit: band.limits.find((limit) => limit.criterion.compression_dB === 3),
    })),
  } as Parameters<typeof listPublishedChanges>[0];

  it("names the bands whose limit would be printed otherwise, and by how much", () => {
    expect(listPublishedChanges(published, makeSampleResult())).toEqual([]);
    const now = withBand(63, ({ limits }) => ({
      limits: limits.map((limit) =>
        limit.criterion.compression_dB === 3
          ? { ...limit, spl_dB: (limit.spl_dB ?? 0) + 0.8 }
          : limit,
      ),
    }));
    const [change, ...more] = listPublishedChanges(published, now);
    expect(more).toEqual([]);
    expect(change?.nominal_Hz).toBe(63);
    expect((change?.now_dB ?? 0) - (change?.published_dB ?? 0)).toBeCloseTo(0.8, 6);
    expect(change?.words).toContain("+0.8");
  });

  it("says a limit that is reached no more, and a band that is gone", () => {
    const now = withBand(63, ({ limits }) => ({
      limits: limits.map((limit) => ({ ...limit, status: "not reached" as const })),
    }));
    expect(listPublishedChanges(published, now)[0]?.words).toMatch(/, now at least /);
    const fewer = { ...before, bands: before.bands.slice(1) };
    expect(listPublishedChanges(published, fewer)[0]).toMatchObject({
      nominal_Hz: before.bands[0]?.nominal_Hz,
      now_dB: null,
    });
  });
});
