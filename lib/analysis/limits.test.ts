import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  measuredSeries,
  plainRuns,
  type Device,
  type SeriesPlan,
} from "@/tests/support/measured-series";
import { gainRider, overload } from "@/tests/support/static-devices";
import { seededRandom } from "@/tests/support/seeded-random";
import type { Limit } from "../result/result-schema";
import type { Criterion } from "../series/series-schema";
import { assessSeries } from "./assess-series";

const runs = plainRuns(76, 86, 96, 102);
/** H3 alone, amplitude `at102` at a drive of 102 dB, growing by `power` dB per dB. */
const thirdOf =
  (at102: number, power: number): Device["harmonic"] =>
  (_b, drive, order) =>
    order === 3 ? at102 * 10 ** ((power * (drive - 102)) / 20) : 0;

function limitsOf(
  plan: Partial<SeriesPlan> & { device: Device },
  criteria: Criterion[],
  bands = 3,
): Limit[] {
  const series = measuredSeries({ runs, random: seededRandom(4), bands, ...plan });
  return assessSeries(series, { criteria }).bands[1]?.limits ?? [];
}

function limitOf(plan: Partial<SeriesPlan> & { device: Device }, criterion: Criterion): Limit {
  const [limit] = limitsOf(plan, [criterion]);
  if (!limit) throw new Error("no limit");
  return limit;
}

describe("compression limits", () => {
  it("lie on the law: 1 dB and 3 dB of a hard limiter at 90 dB", () => {
    const device = { lossDb: (_b: number, drive: number) => gainRider(90, 0, 0).lossDb(drive) };
    const [one, three] = limitsOf({ device }, [{ compression_dB: 1 }, { compression_dB: 3 }]);
    expect(one).toMatchObject({ status: "found", bound_by: "compression", reached: true });
    expect(Math.abs((one?.nominal_dB ?? 0) - 91)).toBeLessThan(0.7);
    expect(Math.abs((three?.nominal_dB ?? 0) - 93)).toBeLessThan(0.5);
    // A hard limiter's output stays at its threshold.
    expect(Math.abs((three?.spl_dB ?? 0) - 90)).toBeLessThan(0.2);
  });

  it("are not reached up to the top run, and say its numbers", () => {
    const limit = limitOf(
      { device: { lossDb: (_b, drive) => gainRider(101, 0, 0).lossDb(drive) } },
      { compression_dB: 3 },
    );
    expect(limit).toMatchObject({
      status: "not reached",
      nominal_dB: 102,
      reached: false,
      bound_by: null,
    });
    expect(limit.spl_dB).toBeCloseTo(101, 1);
  });

  it("are below the lowest run of a device that is compressed there already", () => {
    const limit = limitOf(
      { device: { lossDb: (_b, drive) => gainRider(60, 0, 0.5).lossDb(drive) } },
      { compression_dB: 1 },
    );
    expect(limit).toMatchObject({ status: "below lowest", nominal_dB: 76, reached: true });
  });

  it("lie between the last run that meets the criterion and the first that does not", () => {
    for (let seed = 1; seed <= 40; seed++) {
      const random = seededRandom(seed);
      const device = gainRider(
        random.uniform(78, 100),
        random.uniform(0, 12),
        random.uniform(0, 0.6),
      );
      const criterion = { compression_dB: random.uniform(0.5, 4) };
      const truths = [76, 86, 96, 102].map((drive) => device.lossDb(drive) - device.lossDb(76));
      // A run within a tenth of a decibel of the criterion may fall on either side.
      if (truths.some((loss) => Math.abs(loss - criterion.compression_dB) < 0.1)) continue;
      const limit = limitOf(
        { device: { lossDb: (_b, drive) => device.lossDb(drive) }, random },
        criterion,
      );
      const failing = truths.findIndex((loss) => loss >= criterion.compression_dB);
      if (failing < 0) expect(limit.status).toBe("not reached");
      else if (limit.status === "found") {
        expect(limit.nominal_dB).toBeGreaterThanOrEqual([76, 86, 96, 102][failing - 1] ?? 0);
        expect(limit.nominal_dB).toBeLessThanOrEqual([76, 86, 96, 102][failing] ?? 0);
      } else expect(limit.status).toBe("below lowest");
    }
  });
});

describe("THD limits", () => {
  const linear = { lossDb: () => 0 };

  it("are interpolated in lg THD between measured, uncompressed neighbours", () => {
    // 8 % at 102 dB, 2 dB per dB: 3 % where 20 lg(8/3) = 8.52 dB of THD lie below, so 4.26 dB of drive.
    const limit = limitOf(
      { device: { ...linear, harmonic: thirdOf(0.08, 2) } },
      { thd_percent: 3 },
    );
    expect(limit).toMatchObject({ status: "found", bound_by: "thd" });
    expect(Math.abs((limit.nominal_dB ?? 0) - 97.74)).toBeLessThan(0.02);
    expect(limit.low_dB).toBeLessThan(97.74);
    expect(limit.high_dB).toBeGreaterThan(97.74);
    expect(Math.abs((limit.spl_dB ?? 0) - 97.74)).toBeLessThan(0.1);
  });

  it("are a bracket only where a neighbour is compressed", () => {
    const clip = overload("hard clip", 99);
    const device = {
      lossDb: (_b: number, u: number) => clip.lossDb(u),
      harmonic: (_b: number, u: number, n: number) => clip.harmonic(u, n),
    };
    expect(limitOf({ device }, { thd_percent: 3 })).toMatchObject({
      status: "found",
      nominal_dB: 96,
      low_dB: 96,
      high_dB: 102,
      bound_by: "thd",
    });
  });

  it("are not assessed while noise leaves them open, and say so", () => {
    const limit = limitOf(
      { device: { ...linear, harmonic: thirdOf(0.001, 1) }, floor: 0.03 },
      { thd_percent: 3 },
    );
    expect(limit).toMatchObject({ status: "not assessed", nominal_dB: null, reached: null });
    expect(limit.reason).toContain("noise");
  });

  it("are below lowest where the quietest run exceeds them, not reached where all meet them", () => {
    const device = { ...linear, harmonic: thirdOf(0.05, 0) };
    expect(limitOf({ device }, { thd_percent: 3 })).toMatchObject({
      status: "below lowest",
      nominal_dB: 76,
      reached: true,
    });
    expect(limitOf({ device }, { thd_percent: 10 })).toMatchObject({
      status: "not reached",
      nominal_dB: 102,
    });
  });

  it("are not assessed where harmonics lie above the range", () => {
    const series = measuredSeries({
      device: { ...linear, harmonic: thirdOf(0.01, 1) },
      runs,
      bands: 27,
    });
    const { bands } = assessSeries(series, {
      criteria: [{ thd_percent: 3 }, { thd_percent: 3, compression_dB: 3 }],
    });
    const high = bands.find(({ nominal_Hz }) => nominal_Hz === 12_500);
    expect(high?.limits[0]?.status).toBe("not assessed");
    // A pair leaves THD out there and says so.
    expect(high?.limits[1]?.status).toBe("not reached");
    expect(high?.limits[1]?.reason).toContain("THD left out");
  });
});

describe("pairs", () => {
  it("are bound by whichever half comes first", () => {
    const device = {
      lossDb: (_b: number, u: number) => gainRider(88, 0, 0).lossDb(u),
      harmonic: thirdOf(0.02, 1),
    };
    expect(limitOf({ device }, { compression_dB: 3, thd_percent: 3 })).toMatchObject({
      status: "found",
      bound_by: "compression",
    });
    const loud = { lossDb: () => 0, harmonic: thirdOf(0.08, 2) };
    expect(limitOf({ device: loud }, { compression_dB: 3, thd_percent: 3 })).toMatchObject({
      status: "found",
      bound_by: "thd",
    });
  });

  it("are open while a half is, unless the other has failed", () => {
    const pair = { compression_dB: 3, thd_percent: 3 };
    expect(limitOf({ device: { lossDb: () => 0 }, floor: 0.03 }, pair).status).toBe("not assessed");
    const held = { lossDb: (_b: number, u: number) => gainRider(88, 0, 0).lossDb(u) };
    expect(limitOf({ device: held, floor: 0.03 }, pair)).toMatchObject({
      status: "found",
      bound_by: "compression",
    });
  });
});

describe("long-term limits", () => {
  const conditioning = { minutes: 10, crest_dB: 12, rms_re_sweep_dB: -3, gap_s: 0.5 };
  const hot = (...levels: number[]) => [
    ...runs,
    ...levels.map((levelDb) => ({ levelDb, kind: "long-term" as const, conditioning })),
  ];
  const device: Device = {
    lossDb: (_b, drive, run) => (run.kind === "long-term" ? (drive - 80) / 10 : 0),
  };
  const long = (levels: number[], lossDb: number) =>
    limitsOf({ device, runs: hot(...levels) }, [{ compression_dB: lossDb }]).find(
      ({ kind }) => kind === "long-term",
    );

  it("are pass or fail from one run", () => {
    expect(long([96], 3)).toMatchObject({ status: "not reached", nominal_dB: 96, reached: false });
    expect(long([96], 1)).toMatchObject({ status: "below lowest", nominal_dB: 96, reached: true });
  });

  it("are a bracket from two", () => {
    expect(long([86, 96], 1)).toMatchObject({
      status: "found",
      nominal_dB: 86,
      low_dB: 86,
      high_dB: 96,
    });
  });

  it("are left out without long-term runs", () => {
    expect(limitsOf({ device }, [{ compression_dB: 1 }]).map(({ kind }) => kind)).toEqual([
      "short-term",
    ]);
  });
});

describe("limits and the onset keep their order", () => {
  it("for any device and any criteria", () => {
    const arbitrary = fc.record({
      seed: fc.integer({ min: 1, max: 100_000 }),
      theta: fc.double({ min: 70, max: 101, noNaN: true }),
      knee: fc.double({ min: 0, max: 20, noNaN: true }),
      slope: fc.double({ min: 0, max: 0.8, noNaN: true }),
      third: fc.double({ min: 0.0005, max: 0.1, noNaN: true }),
      losses: fc.uniqueArray(fc.double({ min: 0.4, max: 6, noNaN: true }), {
        minLength: 2,
        maxLength: 4,
      }),
      percents: fc.uniqueArray(fc.double({ min: 0.5, max: 20, noNaN: true }), {
        minLength: 2,
        maxLength: 4,
      }),
    });
    fc.assert(
      fc.property(arbitrary, ({ seed, theta, knee, slope, third, losses, percents }) => {
        const rider = gainRider(theta, knee, slope);
        const random = seededRandom(seed);
        const device = {
          lossDb: (_b: number, u: number) => rider.lossDb(u),
          harmonic: thirdOf(third, 2),
        };
        const criteria = [
          ...losses.toSorted((a, b) => a - b).map((compression_dB) => ({ compression_dB })),
          ...percents.toSorted((a, b) => a - b).map((thd_percent) => ({ thd_percent })),
        ];
        const series = measuredSeries({ device, runs, random, noiseDb: 0.02, bands: 2 });
        for (const { onset, limits } of assessSeries(series, { criteria }).bands) {
          const drives = (half: "compression_dB" | "thd_percent") =>
            limits
              .filter(
                ({ criterion, status }) =>
                  criterion[half] !== undefined && status !== "not assessed",
              )
              .map(({ nominal_dB }) => nominal_dB ?? Number.NaN);
          for (const half of ["compression_dB", "thd_percent"] as const) {
            const values = drives(half);
            expect(values).toEqual(values.toSorted((a, b) => a - b));
          }
          const first = drives("compression_dB")[0];
          if (onset.nominal_dB !== null && first !== undefined)
            expect(onset.nominal_dB).toBeLessThanOrEqual(first + 1e-9);
        }
      }),
      { numRuns: 60, seed: 11 },
    );
  }, 30_000);
});
