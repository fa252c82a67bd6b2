import { describe, expect, it } from "vitest";
import { measuredSeries, plainRuns, type RunPlan } from "@/tests/support/measured-series";
import { gainRider } from "@/tests/support/static-devices";
import { seededRandom } from "@/tests/support/seeded-random";
import { DEFAULT_CRITERIA } from "../series/series-schema";
import { assessSeries, type Assessment } from "./assess-series";
import { groupShortTerm, lossOf } from "./compression";
import { meanSigmaDb, repeatSigmaDb } from "./uncertainty";

const settings = { criteria: [...DEFAULT_CRITERIA] };
const limiter = gainRider(92, 0, 0);
const device = { lossDb: (_b: number, drive: number) => limiter.lossDb(drive) };
const codes = ({ warnings }: Assessment): string[] => warnings.map(({ code }) => code);

describe("compression of a band", () => {
  it("is the expected level minus the measured one, with its sign", () => {
    const { bands } = assessSeries(
      measuredSeries({ device, runs: plainRuns(76, 86, 96, 102) }),
      settings,
    );
    const levels = bands[4]?.levels ?? [];
    expect(levels.map(({ compression_dB }) => Number(compression_dB?.toFixed(6)))).toEqual([
      0, 0, 4, 10,
    ]);
    expect(levels.map(({ expected_dB }) => expected_dB)).toEqual([76, 86, 96, 102]);
    expect(levels[0]?.uncertainty_dB).toBe(0);
  });

  it("counts drive, not level, where they differ", () => {
    const series = measuredSeries({ device: { lossDb: () => 0 }, runs: plainRuns(76, 96) });
    for (const run of series.runs) if (run.levelDb === 96) run.driveDb = 95.5;
    const { bands } = assessSeries(series, settings);
    expect(bands[0]?.levels[1]?.compression_dB).toBeCloseTo(-0.5, 9);
  });
});

describe("the gain that losses are counted from", () => {
  it("is not pulled down by a small loss in a run of little noise", () => {
    // 0.1 dB are lost in the 96 dB run already, which is ten times quieter in noise than those below it.
    const knee = {
      lossDb: (_b: number, drive: number) => ({ 76: 0, 86: 0, 96: 0.1, 102: 0.4 })[drive] ?? 0,
    };
    const series = measuredSeries({
      device: knee,
      runs: plainRuns(76, 86, 96, 102),
      noiseDb: (_b, levelDb) => (levelDb > 90 ? 0.002 : 0.02),
    });
    const { bands } = assessSeries(series, settings);
    expect(bands.map(({ onset }) => onset.status)).toEqual(Array(27).fill("found"));
    expect(bands[4]?.onset.nominal_dB).toBeGreaterThan(99.5);
  });
});

describe("repeats", () => {
  const runs: RunPlan[] = [1, 2, 3].flatMap((take) =>
    [76, 86, 96, 102].map((levelDb) => ({ levelDb, file: `${levelDb}-${take}.wav` })),
  );
  const series = measuredSeries({ device, runs, random: seededRandom(6), noiseDb: 0.05 });

  it("are combined to their mean", () => {
    const groups = groupShortTerm(series);
    expect(groups.map(({ runs: takes }) => takes.length)).toEqual([3, 3, 3, 3]);
    const mean =
      series.runs
        .filter(({ levelDb }) => levelDb === 102)
        .reduce((sum, run) => sum + (run.bands[2]?.levelDb ?? 0), 0) / 3;
    expect((groups[3]?.gainDb[2] ?? 0) + 102).toBeCloseTo(mean, 9);
    expect(assessSeries(series, settings).bands[2]?.levels).toHaveLength(12);
  });

  it("give their scatter as uncertainty where it is more than the noise", () => {
    // Noise is stated as 0.001 dB, the takes scatter by 0.05 dB: of three, 0.05 / sqrt(3).
    const quiet = measuredSeries({ device, runs, random: seededRandom(6), noiseDb: 0.05 });
    for (const run of quiet.runs) for (const band of run.bands) band.sigmaDb = 0.001;
    const [reference, ...others] = groupShortTerm(quiet);
    const sigmas = reference.sigmaDb.map((sigma) => sigma ** 2);
    const rms = Math.sqrt(sigmas.reduce((a, b) => a + b, 0) / sigmas.length);
    expect(Math.abs(rms - 0.05 / Math.sqrt(3))).toBeLessThan(0.005);
    const top = others.at(-1);
    expect(top && lossOf(top, reference, 3).sigmaDb).toBeGreaterThan(0.02);
  });

  it("say nothing where nothing was repeated", () => {
    expect(repeatSigmaDb([{ gainDb: [new Float64Array(3)] }], 3)).toBeNull();
    expect(meanSigmaDb([0.02], null)).toBeCloseTo(0.02, 12);
    expect(meanSigmaDb([0.02, 0.02], null)).toBeCloseTo(0.02 / Math.SQRT2, 12);
  });
});

describe("steps of the player", () => {
  const limited = { lossDb: (b: number, drive: number) => (b < 8 ? limiter.lossDb(drive) : 0) };
  const off = [{ levelDb: 76 }, { levelDb: 86 }, { levelDb: 96, playedDb: 95.9 }, { levelDb: 102 }];

  it("are never corrected, but said", () => {
    const assessment = assessSeries(
      measuredSeries({ device: { lossDb: () => 0 }, runs: off, random: seededRandom(8) }),
      settings,
    );
    const warning = assessment.warnings.find(({ code }) => code === "level.common-offset");
    expect(warning?.message).toMatch(/^all bands: 0\.1 dB in the 96 dB run/);
    expect(warning?.file).toBe("96.wav");
    expect(assessment.bands[12]?.levels[2]?.compression_dB).toBeGreaterThan(0.05);
    expect(assessment.bands.every(({ onset }) => onset.status === "not reached")).toBe(true);
  });

  it("do not move an onset where free bands show them", () => {
    const assessment = assessSeries(
      measuredSeries({ device: limited, runs: off, random: seededRandom(8) }),
      settings,
    );
    expect(codes(assessment)).toContain("level.common-offset");
    expect(Math.abs((assessment.bands[3]?.onset.nominal_dB ?? 0) - limiter.onsetDb)).toBeLessThan(
      0.5,
    );
    expect(assessment.bands[12]?.levels[2]?.compression_dB).toBeGreaterThan(0.05);
  });

  it("are not named where the whole loudspeaker is limited alike", () => {
    expect(
      codes(assessSeries(measuredSeries({ device, runs: plainRuns(76, 86, 96, 102) }), settings)),
    ).toEqual([]);
  });
});

describe("warnings of a series", () => {
  it("say that a battery loudspeaker's reference is compressed", () => {
    const battery = gainRider(70, 4, 0.1);
    const assessment = assessSeries(
      measuredSeries({
        device: { lossDb: (_b, u) => battery.lossDb(u) },
        runs: plainRuns(76, 86, 96, 102),
      }),
      settings,
    );
    expect(codes(assessment)).toContain("reference.compressed");
    expect(assessment.bands[5]?.onset).toMatchObject({
      status: "below lowest",
      nominal_dB: null,
      high_dB: 76,
    });
    expect(assessment.bands[5]?.cause).toBe("limiter");
  });

  it("say that the reference lies close under the first onset", () => {
    const close = gainRider(82, 0, 0);
    const assessment = assessSeries(
      measuredSeries({
        device: { lossDb: (_b, u) => close.lossDb(u) },
        runs: plainRuns(76, 80, 84, 90),
      }),
      settings,
    );
    expect(
      assessment.warnings.find(({ code }) => code === "reference.compressed")?.message,
    ).toMatch(/only 6\.\d dB under/);
  });

  it("say a drift from the closing run, which is no data", () => {
    const closing: RunPlan = { levelDb: 76, kind: "closing", playedDb: 75.7 };
    const runs = [...plainRuns(76, 86, 96, 102), closing];
    const assessment = assessSeries(measuredSeries({ device, runs }), settings);
    expect(assessment.warnings.find(({ code }) => code === "series.drift")?.message).toContain(
      "\u22120.30 dB",
    );
    const plain = assessSeries(
      measuredSeries({ device, runs: plainRuns(76, 86, 96, 102) }),
      settings,
    );
    expect(assessment.bands[0]?.onset).toEqual(plain.bands[0]?.onset);
  });

  it("say where no static law follows the losses: slow control", () => {
    const slow = {
      lossDb: (b: number, drive: number) =>
        b < 2 ? ({ 76: 0, 86: 2, 96: 0.4, 102: 3 }[drive] ?? 0) : 0,
    };
    const assessment = assessSeries(
      measuredSeries({ device: slow, runs: plainRuns(76, 86, 96, 102) }),
      settings,
    );
    expect(codes(assessment)).toContain("onset.slow-control");
    expect(assessment.bands[0]?.onset).toMatchObject({
      status: "unresolved",
      control: "slow control",
    });
    expect(assessment.bands[0]?.cause).toBe("unresolved");
  });

  it("say where two controls act one behind the other", () => {
    const twofold = {
      lossDb: (b: number, drive: number) =>
        b < 2 ? ({ 70: 0, 76: 3, 86: 3.1, 96: 3.2, 102: 8 }[drive] ?? 0) : 0,
    };
    const assessment = assessSeries(
      measuredSeries({ device: twofold, runs: plainRuns(70, 76, 86, 96, 102) }),
      settings,
    );
    expect(codes(assessment)).toContain("onset.several-controls");
    expect(codes(assessment)).not.toContain("onset.slow-control");
    expect(assessment.bands[0]).toMatchObject({
      cause: "unresolved",
      onset: { status: "unresolved", control: "several controls" },
    });
  });

  it("say where the output grows more than the drive", () => {
    const rising = { lossDb: (_b: number, drive: number) => (drive > 90 ? -0.6 : 0) };
    expect(
      codes(
        assessSeries(measuredSeries({ device: rising, runs: plainRuns(76, 86, 96) }), settings),
      ),
    ).toContain("level.rising-gain");
  });

  it("say that one level is not enough", () => {
    const assessment = assessSeries(measuredSeries({ device, runs: plainRuns(76) }), settings);
    expect(codes(assessment)).toContain("series.one-level");
    expect(assessment.bands[0]?.onset.status).toBe("unresolved");
  });

  it("leave SPL out where it is not valid, and keep compression and onset", () => {
    const assessment = assessSeries(
      measuredSeries({ device, runs: plainRuns(76, 86, 96, 102), splValid: false }),
      settings,
    );
    const band = assessment.bands[4];
    expect(band?.onset.status).toBe("found");
    expect(band?.onset.spl_dB).toBeNull();
    expect(band?.limits.every(({ spl_dB }) => spl_dB === null)).toBe(true);
    expect(assessment.headline).toEqual([]);
    expect(codes(assessment)).toContain("headline.refused");
  });
});
