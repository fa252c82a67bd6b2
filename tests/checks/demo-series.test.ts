/** The demo loudspeakers through the whole engine: each shows what it was made to show, by its own truth. */
import { beforeAll, describe, expect, it } from "vitest";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import type { Band, Result } from "../../lib/result/result-schema";
import { DEMO_LABS, toVirtualLoudspeaker, type DemoSeries } from "../../scripts/demo/demo-labs";
import { findStaticOnsetDb } from "../../scripts/demo/steady-tone";
import { composeDemoFolder } from "../support/demo-folder";
import { toSource } from "../support/devices/record-device";

interface Expectation {
  key: DemoSeries["key"];
  /** By band: the cause that the analysis names. */
  causes: Record<number, Band["cause"]>;
  /** Bands whose onset is held against steady tones: where a step of level is well between the runs. */
  onsets: number[];
  /** From this band up nothing gives out. */
  freeFromHz: number;
  warnings: string[];
}

const EXPECTATIONS: Expectation[] = [
  {
    key: "osier8a",
    causes: { 40: "limiter", 50: "limiter", 63: "limiter" },
    onsets: [40, 50, 63],
    freeFromHz: 100,
    warnings: [],
  },
  {
    key: "brackenMini",
    causes: { 40: "overload", 50: "overload", 63: "overload" },
    onsets: [50, 63],
    freeFromHz: 160,
    warnings: [],
  },
  {
    key: "harbourTwo",
    causes: { 40: "none", 63: "none", 1000: "none" },
    onsets: [],
    freeFromHz: 40,
    warnings: [],
  },
  { key: "loom6", causes: { 63: "none", 1000: "none" }, onsets: [], freeFromHz: 40, warnings: [] },
  {
    key: "fennel5",
    causes: { 40: "port", 50: "port", 63: "port" },
    onsets: [50, 63],
    freeFromHz: 100,
    warnings: ["reference.compressed"],
  },
  {
    key: "samphire3",
    causes: { 63: "equaliser", 125: "equaliser", 1000: "limiter", 4000: "limiter" },
    onsets: [1000, 4000],
    freeFromHz: Infinity,
    // A bass boost that is withdrawn and a limiter act in the same bands.
    warnings: ["reference.compressed", "onset.several-controls"],
  },
  {
    key: "ketch12",
    causes: { 50: "limiter", 500: "limiter", 4000: "limiter" },
    onsets: [63, 500, 4000],
    freeFromHz: Infinity,
    warnings: [],
  },
];

const demoOf = (key: DemoSeries["key"]): DemoSeries => {
  const demo = DEMO_LABS.flatMap((lab) => lab.series).find((s) => s.key === key);
  if (demo === undefined) throw new Error(`no demo series ${key}`);
  return demo;
};
const results = new Map<DemoSeries["key"], Promise<Result>>();
/** Each series is recorded and analysed once, whoever asks first. */
function analyse(key: DemoSeries["key"]): Promise<Result> {
  const known = results.get(key);
  if (known !== undefined) return known;
  const { series, files } = composeDemoFolder(demoOf(key));
  const result = analyseSeries(series, toSource(files));
  results.set(key, result);
  return result;
}

describe.each(EXPECTATIONS)("$key", (expected) => {
  const demo = demoOf(expected.key);
  let result: Result;
  beforeAll(async () => {
    result = await analyse(expected.key);
  }, 120_000);
  const bandAt = (hz: number): Band => {
    const band = result.bands.find((b) => b.nominal_Hz === hz);
    if (band === undefined) throw new Error(`no band at ${hz} Hz`);
    return band;
  };

  it("shows its causes", () => {
    const named = Object.keys(expected.causes).map((hz) => [hz, bandAt(Number(hz)).cause]);
    expect(Object.fromEntries(named)).toEqual(expected.causes);
  });

  it("has onset intervals that contain what steady tones say", () => {
    const missed = expected.onsets.flatMap((hz) => {
      const { onset, exact_Hz } = bandAt(hz);
      const levels = demo.plan.levels.map((l) => l.level_dB);
      const truthDb = findStaticOnsetDb(toVirtualLoudspeaker(demo), exact_Hz, 1 / 3, [
        Math.min(...levels) - 20,
        Math.max(...levels),
      ]);
      const holds =
        truthDb >= (onset.low_dB ?? Infinity) && truthDb <= (onset.high_dB ?? -Infinity);
      return holds ? [] : [{ hz, truthDb, onset }];
    });
    expect(missed).toEqual([]);
  });

  it("is free where nothing gives out", () => {
    const free = result.bands.filter((b) => b.nominal_Hz >= expected.freeFromHz);
    expect(free.filter((b) => b.cause !== "none").map((b) => b.nominal_Hz)).toEqual([]);
    expect(
      free
        .filter((b) => b.onset.status === "found" && b.onset.nominal_dB! < 101)
        .map((b) => b.nominal_Hz),
    ).toEqual([]);
  });

  it("gives no warning but its own", () => {
    expect([...new Set(result.warnings.map((w) => w.code))].sort()).toEqual(
      [...expected.warnings].sort(),
    );
  });

  it("reads the planned level in its quietest run", () => {
    const lowest = result.runs.find((run) => run.kind === "short-term");
    expect(Math.abs((lowest?.measured_level_dB ?? NaN) - (lowest?.level_dB ?? NaN))).toBeLessThan(
      0.1,
    );
  });
});

describe("loom6, long-term", () => {
  it("loses to heat what its coils say", async () => {
    const { bands } = await analyse("loom6");
    const at = (hz: number) =>
      bands.find((b) => b.nominal_Hz === hz)?.long_term.find((l) => l.level_dB === 102);
    // Woofer 15.6 K after conditioning, tweeter 9.5 K: 0.52 and 0.32 dB; in the crossover both.
    expect(Math.abs((at(200)?.thermal_dB ?? NaN) - 0.51)).toBeLessThan(0.02);
    expect(Math.abs((at(8000)?.thermal_dB ?? NaN) - 0.31)).toBeLessThan(0.02);
    expect(at(200)?.cause).toBe("thermal");
  }, 120_000);
});
