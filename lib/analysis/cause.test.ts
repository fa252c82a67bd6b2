import { describe, expect, it } from "vitest";
import {
  measuredSeries,
  plainRuns,
  type Device,
  type RunPlan,
} from "@/tests/support/measured-series";
import { gainRider, overload, twoPaths, type StaticDevice } from "@/tests/support/static-devices";
import { seededRandom } from "@/tests/support/seeded-random";
import type { Band } from "../result/result-schema";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { assessSeries } from "./assess-series";

const settings = { criteria: [...DEFAULT_CRITERIA] };
const runs = plainRuns(76, 86, 96, 102);
const linear: StaticDevice = { lossDb: () => 0, onsetDb: Infinity, harmonic: () => 0 };

interface Setting {
  runs?: RunPlan[];
  tuningHz?: number;
  floor?: number;
  noiseDb?: number;
  harmonic?: Device["harmonic"];
  bands?: number;
}

function assess(of: (b: number) => StaticDevice, setting: Setting = {}) {
  const devices = Array.from({ length: 27 }, (_, b) => of(b));
  return assessSeries(
    measuredSeries({
      device: {
        lossDb: (b, drive) => devices[b]?.lossDb(drive) ?? 0,
        harmonic:
          setting.harmonic ?? ((b, drive, order) => devices[b]?.harmonic(drive, order) ?? 0),
      },
      runs: setting.runs ?? runs,
      random: seededRandom(7),
      noiseDb: setting.noiseDb ?? 0.01,
      bands: setting.bands ?? 27,
      ...(setting.tuningHz === undefined ? {} : { tuningHz: setting.tuningHz }),
      ...(setting.floor === undefined ? {} : { floor: setting.floor }),
    }),
    settings,
  );
}

const causesOf = (bands: Band[]): string[] => [...new Set(bands.map(({ cause }) => cause))];

describe("causes of a device that shows one law in every band", () => {
  it.each([
    ["linear", linear, ["none"]],
    ["hard limiter", gainRider(92, 0, 0.02), ["limiter"]],
    ["soft limiter", gainRider(90, 8, 0.05), ["limiter"]],
    ["compressor 2:1", gainRider(88, 4, 0.5), ["compressor"]],
    ["compressor 2.5:1", gainRider(86, 0, 0.4), ["compressor"]],
    ["hard clip", overload("hard clip", 92), ["overload"]],
    ["tanh", overload("tanh", 96), ["overload"]],
    ["cubic", overload("cubic", 96), ["overload"]],
    ["arctangent", overload("arctangent", 92), ["overload"]],
  ] as const)("%s", (_name, device, expected) => {
    const { bands } = assess(() => device);
    expect(causesOf(bands)).toEqual(expected);
    for (const band of bands) expect(band.cause_reason).toMatch(/^[A-Z1-9].*\d.*\.$/);
  });

  it("infers the verdict on distortion where 3 f lies above the range, and says so", () => {
    const { bands } = assess(() => overload("hard clip", 92));
    const high = bands.filter(({ exact_Hz }) => 3 * exact_Hz > 20_000);
    expect(high.length).toBeGreaterThan(2);
    for (const band of high) {
      expect(band.cause_inferred).toBe(true);
      expect(band.cause_reason).toContain("neighbours");
    }
    expect(
      bands.filter(({ exact_Hz }) => 3 * exact_Hz < 20_000).some((band) => band.cause_inferred),
    ).toBe(false);
  });

  it.each([0.001, 0.003, 0.01, 0.03])(
    "a driver with %f H3 of its own behind a limiter is no overload",
    (ownThird) => {
      for (let seed = 1; seed <= 20; seed++) {
        const limiter = gainRider(seededRandom(seed).uniform(84, 100), 0, 0.05);
        // The driver's H3 follows the square of the output; `ownThird` at 102 dB out.
        const harmonic: Device["harmonic"] = (_b, drive, order) =>
          order === 3 ? ownThird * 10 ** ((2 * (drive - limiter.lossDb(drive) - 102)) / 20) : 0;
        const { bands } = assess(() => limiter, { harmonic, bands: 2 });
        expect(causesOf(bands)).not.toContain("overload");
      }
    },
  );

  it("is unresolved where one run loses less than 1 dB", () => {
    const { bands } = assess(() => gainRider(101.4, 0, 0));
    expect(causesOf(bands)).toEqual(["unresolved"]);
    expect(bands[3]?.cause_reason).toContain("neither ceiling nor slope");
  });

  it("is unresolved where noise hides the harmonics in every band", () => {
    const { bands } = assess(() => gainRider(98, 0, 0), { floor: 0.2 });
    expect(causesOf(bands)).toEqual(["unresolved"]);
    expect(bands[3]?.cause_reason).toContain("noise");
  });
});

describe("an overload whose H3 follows its own output", () => {
  // An arctangent loses gradually and its H3 is 1/3 of the amplitude lost, at any level.
  const law = (b: number) => overload("arctangent", 100 + 3 * b);

  it("is told by the amount of odd distortion, and by its neighbours where that is small", () => {
    const { bands } = assess(law);
    const losing = bands.filter(({ onset }) => onset.status === "found");
    expect(losing.length).toBeGreaterThan(3);
    expect(causesOf(losing)).toEqual(["overload"]);
    expect(losing[0]?.cause_inferred).toBe(false);
    expect(losing.at(-1)?.cause_inferred).toBe(true);
  });

  it("is not taken for one where the same distortion comes with a sudden loss", () => {
    const limiter = gainRider(100.5, 0, 0);
    const third: Device["harmonic"] = (_b, drive, order) =>
      order === 3 ? 0.06 * 10 ** ((2 * (drive - limiter.lossDb(drive) - 102)) / 20) : 0;
    expect(causesOf(assess(() => limiter, { harmonic: third }).bands)).not.toContain("overload");
  });
});

describe("causes that need more than one band", () => {
  it("names an equaliser: bass withdrawn from the lowest step on, the mids free", () => {
    const { bands } = assess((b) => (b < 5 ? gainRider(70, 0, 0.7) : linear));
    expect(bands.slice(0, 5).map(({ cause }) => cause)).toEqual(Array(5).fill("equaliser"));
    expect(causesOf(bands.slice(5))).toEqual(["none"]);
    expect(bands[2]?.onset.status).toBe("below lowest");
  });

  it("names a compressor where every band gives way from the lowest step on", () => {
    expect(causesOf(assess(() => gainRider(70, 0, 0.6)).bands)).toEqual(["compressor"]);
  });

  const port = (b: number) => gainRider(88 + 1.6 * (b - 2) ** 2, 10, 0.6);

  it("names a port around the given tuning", () => {
    const { bands } = assess(port, { tuningHz: 63 });
    expect(bands.slice(1, 4).map(({ cause }) => cause)).toEqual(["port", "port", "port"]);
    expect(bands[2]?.cause_reason).toContain("63 Hz");
  });

  it("suspects a port without the tuning", () => {
    const { bands } = assess(port);
    expect(bands[2]?.cause).toBe("compressor");
    expect(bands[2]?.cause_reason).toContain("port suspected");
  });

  it("names a port whose loss goes when it is blocked, and keeps the variant apart", () => {
    const variant = "port blocked";
    const blocked: RunPlan[] = [86, 102].map((levelDb) => ({ levelDb, variant }));
    const series = measuredSeries({
      device: { lossDb: (b, drive, run) => (run.variant === variant ? 0 : port(b).lossDb(drive)) },
      runs: [...runs, ...blocked],
      random: seededRandom(9),
    });
    const plain = { ...series, runs: series.runs.filter((run) => run.variant === undefined) };
    const { bands } = assessSeries(series, settings);
    expect(bands[2]?.cause).toBe("port");
    expect(bands[2]?.cause_reason).toContain("port blocked");
    expect(bands[2]?.onset).toEqual(assessSeries(plain, settings).bands[2]?.onset);
    const shown = bands[2]?.levels.filter((level) => level.variant === variant) ?? [];
    expect(shown.map(({ compression_dB }) => Math.abs(compression_dB ?? 1) < 0.1)).toEqual([
      true,
      true,
    ]);
  });

  it("gives a crossover region to the limiter next to it", () => {
    const { bands } = assess((b) =>
      b < 6 ? gainRider(90, 0, 0) : b < 9 ? twoPaths(90, 0.9 - 0.25 * (b - 6)) : linear,
    );
    expect(bands.slice(0, 6).map(({ cause }) => cause)).toEqual(Array(6).fill("limiter"));
    expect(bands[7]?.cause).toBe("limiter");
    expect(bands[7]?.cause_inferred).toBe(true);
  });

  it("lends no limiter whose ceiling one run alone cannot show", () => {
    // A compressor whose threshold climbs from band to band: the loss shrinks as it does beside a crossover.
    const { bands } = assess((b) => gainRider(97 + 0.2 * b, 2, 0.5));
    expect(bands.filter(({ cause_inferred: lent }) => lent)).toEqual([]);
    expect(bands.slice(5).map(({ cause }) => cause)).not.toContain("limiter");
  });

  it("calls distortion without compression an overload only where it grows like one", () => {
    const thirdOf =
      (power: number): Device["harmonic"] =>
      (_b, drive, order) =>
        order === 3 ? 0.04 * 10 ** ((power * (drive - 102)) / 20) : 0;
    expect(causesOf(assess(() => linear, { harmonic: thirdOf(2) }).bands)).toEqual(["none"]);
    const steep = assess(() => linear, { harmonic: thirdOf(5) }).bands.filter(
      ({ exact_Hz }) => 3 * exact_Hz < 20_000,
    );
    expect(causesOf(steep)).toEqual(["overload"]);
  });
});
