/**
 * Whatever the bytes say: a recording, a table, a result, or a typed error; never a crash, a hang or
 * more than 1 GiB. The readers' own tests fuzz them lightly; here formats are bent on purpose.
 */
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import fc from "fast-check";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { synthesiseStimulus } from "../../lib/analysis/sweep";
import { toByteSource } from "../../lib/audio/byte-source";
import { previewTable } from "../../lib/audio/preview-table";
import { readRecording } from "../../lib/audio/read-recording";
import { readTable } from "../../lib/audio/read-table";
import { WAV_FORMATS, writeWav } from "../../lib/audio/write-wav";
import { AppError } from "../../lib/errors/app-error";
import { labSettingsSchema } from "../../lib/labs/settings-schema";
import { toResultText } from "../../lib/result/result-text";
import { arrivalReportSchema } from "../../lib/runs/arrival-schema";
import { checkArrival } from "../../lib/runs/arrival/check-arrival";
import { createFolderSource } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import { planSchema } from "../../lib/series/plan-schema";
import { toPlannedRuns } from "../../lib/series/planned-runs";
import { HARMONIC_UNITS } from "../../lib/series/table-columns";
import { runFfmpeg, runSox } from "../support/programs";
import { createNormal, simulateTone } from "../support/simulated-sweep";

const LONGEST_MS = 5000;
const MOST_KIB = 2 ** 20;
const SEED = 20_260_731;

/** Of this process: a busy machine is no failure. */
const computedMs = (): number => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
};

/** Runs to a value or a typed error, in time; anything else fails with what was thrown. */
async function settle<T>(work: () => T | Promise<T>): Promise<T | null> {
  const startedAt = computedMs();
  try {
    return await work();
  } catch (error) {
    if (!(error instanceof AppError) || error.status >= 500) throw error;
    expect(error.message.length).toBeGreaterThan(15);
    return null;
  } finally {
    expect(computedMs() - startedAt).toBeLessThan(LONGEST_MS);
  }
}

const normal = createNormal(5);
const SAMPLES = Float64Array.from({ length: 800 }, () => Math.max(-1, Math.min(1, 0.2 * normal())));

interface Bend {
  /** Bytes near the start, where heads are. */
  head: readonly [number, number][];
  /** Bytes anywhere, by their share of the way. */
  anywhere: readonly [number, number][];
  /** Share of the file that is left. */
  keep: number;
  tail: Uint8Array;
}
const anyShare = fc.double({ min: 0, max: 0.999, noNaN: true });
const anyByte = fc.nat(255);
const bends: fc.Arbitrary<Bend> = fc.oneof(
  fc.record({
    head: fc.array(fc.tuple(fc.nat(90), fc.constantFrom(0, 1, 0x7f, 0x80, 0xfe, 0xff)), {
      maxLength: 6,
    }),
    anywhere: fc.array(fc.tuple(anyShare, anyByte), { maxLength: 4 }),
    keep: anyShare,
    tail: fc.uint8Array({ maxLength: 12 }),
  }),
  // One byte, and all the rest whole.
  fc.record({
    head: fc.array(fc.tuple(fc.nat(60), anyByte), { minLength: 1, maxLength: 1 }),
    anywhere: fc.constant([]),
    keep: fc.constant(1),
    tail: fc.constant(new Uint8Array(0)),
  }),
);

function bend(bytes: Uint8Array, { head, anywhere, keep, tail }: Bend): Uint8Array {
  const bent = Uint8Array.from([...bytes.subarray(0, Math.round(keep * bytes.length)), ...tail]);
  for (const [at, value] of head) if (at < bent.length) bent[at] = value;
  for (const [share, value] of anywhere) bent[Math.floor(share * bent.length)] = value;
  return bent;
}

const readAny = (bytes: Uint8Array) =>
  settle(async () => {
    const { recording } = await readRecording(toByteSource(bytes), { file: "take.wav" });
    expect(recording.samples.every((x) => Number.isFinite(x))).toBe(true);
    expect(recording.samples.length).toBeGreaterThan(0);
    expect(recording.rateHz).toBeGreaterThan(0);
    return recording;
  });

let folder = "";
let strangers: Uint8Array[] = [];
beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), "tidemark-fuzz-"));
  const path = (name: string): string => join(folder, name);
  writeFileSync(path("in.wav"), writeWav([SAMPLES, SAMPLES], 48_000, "pcm24"));
  await runSox([path("in.wav"), "-b", "16", path("16.flac")]);
  await runFfmpeg(["-i", path("in.wav"), "-sample_fmt", "s32", path("24.flac")]);
  await runFfmpeg(["-i", path("in.wav"), "-c:a", "pcm_s24le", "-rf64", "always", path("rf64.wav")]);
  await runSox([path("in.wav"), "-b", "32", path("extensible.wav")]);
  strangers = ["16.flac", "24.flac", "rf64.wav", "extensible.wav"].map((name) =>
    readFileSync(path(name)),
  );
}, 60_000);
afterAll(() => {
  rmSync(folder, { recursive: true });
});

describe("bent recordings", () => {
  it("WAV in every format that is written here", async () => {
    const files = WAV_FORMATS.map((format) => writeWav([SAMPLES], 48_000, format));
    let read = 0;
    await fc.assert(
      fc.asyncProperty(fc.constantFrom(...files), bends, async (file, how) => {
        if ((await readAny(bend(file, how))) !== null) read += 1;
      }),
      { numRuns: 400, seed: SEED },
    );
    // The bends are not so wild that nothing is ever read.
    expect(read).toBeGreaterThan(10);
  });

  it("FLAC, RF64 and extensible WAV by other programs", async () => {
    let read = 0;
    await fc.assert(
      fc.asyncProperty(fc.nat(3), bends, async (which, how) => {
        if ((await readAny(bend(strangers[which]!, how))) !== null) read += 1;
      }),
      { numRuns: 300, seed: SEED },
    );
    expect(read).toBeGreaterThan(10);
  });

  it("a FLAC head that claims the longest recording there is", async () => {
    const claims = Uint8Array.from(strangers[0]!, (byte, at) =>
      at === 21 ? byte | 0x0f : at >= 22 && at < 26 ? 0xff : byte,
    );
    expect(await readAny(claims)).toBeNull();
    expect(process.resourceUsage().maxRSS).toBeLessThan(MOST_KIB);
  });
});

describe("bent tables", () => {
  const cell = fc.oneof(
    fc.double({ noNaN: false }).map(String),
    fc.constantFrom("", "1,5", "-", "NaN", "1e999", "0", "Hz", "dB", "H2 [%]", '"', "\0", "\uFEFF"),
    fc.string({ maxLength: 5 }),
  );
  const row = fc.tuple(
    fc.array(cell, { maxLength: 6 }),
    fc.constantFrom("\t", ";", ",", " ", "  "),
    fc.constantFrom("", "* ", "# ", "; "),
  );

  it("are read with ascending frequencies, or refused", async () => {
    let read = 0;
    const text = fc
      .array(row, { maxLength: 12 })
      .map((rows) => rows.map(([cells, mark, comment]) => comment + cells.join(mark)).join("\n"));
    const sound = fc.constant("20 80\n40 81\n80 82\n");
    await fc.assert(
      fc.asyncProperty(
        fc.oneof(
          text,
          fc.tuple(sound, text).map((parts) => parts.join("")),
        ),
        async (content) => {
          await settle(() => {
            const { frequencyHz, levelDb } = readTable(new TextEncoder().encode(content), "t.csv");
            read += 1;
            expect(levelDb).toHaveLength(frequencyHz.length);
            expect(frequencyHz.every((f, i) => f > (frequencyHz[i - 1] ?? 0))).toBe(true);
            expect(levelDb.every((db) => Number.isFinite(db))).toBe(true);
          });
        },
      ),
      { numRuns: 500, seed: SEED },
    );
    expect(read).toBeGreaterThan(50);
  });

  it("mapped by hand in any way are checked on arrival, with figures that are numbers", async () => {
    const plan = planSchema.parse({});
    const place = toPlannedRuns(plan, "fuzz").find((run) => run.slot === "short-76") ?? null;
    const column = fc.integer({ min: 1, max: 6 });
    const choices = fc.record({
      frequency: fc.oneof(fc.constant(1), column),
      level: fc.oneof(fc.constant(2), column),
      thd: fc.option(column, { nil: undefined }),
      harmonics: fc.array(
        fc.record({
          order: fc.integer({ min: 2, max: 9 }),
          column,
          unit: fc.constantFrom(...HARMONIC_UNITS),
        }),
        { maxLength: 3 },
      ),
      kilohertz: fc.boolean(),
    });
    const level = fc.double({ min: -400, max: 400, noNaN: true }).map(String);
    const rows = fc.array(fc.array(fc.oneof(level, cell), { minLength: 2, maxLength: 6 }), {
      maxLength: 30,
    });
    let passed = 0;
    await fc.assert(
      fc.asyncProperty(rows, choices, async (cells, columns) => {
        const text = cells.map((line, i) => [20 * 1.26 ** i, ...line].join("\t")).join("\n");
        const bytes = new TextEncoder().encode(text);
        await settle(() => previewTable(bytes, "t.csv"));
        const report = await checkArrival({
          run: { file: "t.csv", digest: "a".repeat(64), channel: 1, columns, place },
          plan,
          limits: labSettingsSchema.parse({}).arrival,
          engineVersion: "1",
          siblings: [],
          open: () => toByteSource(bytes),
        });
        const kept: unknown = JSON.parse(JSON.stringify(report));
        expect(arrivalReportSchema.safeParse(kept).error).toBeUndefined();
        if (report.checks[0]?.verdict === "pass") passed += 1;
      }),
      { numRuns: 200, seed: SEED },
    );
    expect(passed).toBeGreaterThan(20);
  });

  it("of one line without end take no longer than their bytes", async () => {
    for (const filling of ["1", "1 ", "*", "\t", ",", "-", '"']) {
      const long = filling.repeat(Math.floor(1_000_000 / filling.length));
      await settle(() => readTable(new TextEncoder().encode(`20 80\n${long}`), "t.csv"));
    }
    expect(process.resourceUsage().maxRSS).toBeLessThan(MOST_KIB);
  });
});

describe("bent series.json, through the whole engine", () => {
  const RATE_HZ = 16_000;
  const shape = {
    startHz: 50,
    stopHz: 5000,
    lengthS: 1,
    rateHz: RATE_HZ,
    leadInS: 0.2,
    leadOutS: 0.2,
  };
  const sweep = synthesiseStimulus(shape);
  const source = () => createFolderSource(folder);
  beforeAll(() => {
    const write = (file: string, samples: ArrayLike<number>): void =>
      writeFileSync(join(folder, file), writeWav([samples], RATE_HZ, "float32"));
    write(
      "a.wav",
      sweep.map((x) => 0.05 * x + 1e-6 * normal()),
    );
    write(
      "b.wav",
      sweep.map((x) => 0.5 * x + 1e-6 * normal()),
    );
    write("cal.wav", simulateTone("cal.wav", RATE_HZ, 0.1, 1000, { seconds: 1 }).samples);
  });
  const series = {
    loudspeaker: "Fuzz",
    environment: "anechoic",
    distance_m: 1,
    gate_ms: 10,
    largest_dimension_m: 0.3,
    tuning_Hz: 100,
    reference_band_Hz: [500, 2000],
    stimulus: {
      start_Hz: 50,
      stop_Hz: 5000,
      length_s: 1,
      rate_Hz: RATE_HZ,
      lead_in_s: 0.2,
      lead_out_s: 0.2,
    },
    calibration: { file: "cal.wav", level_dB: 94, frequency_Hz: 1000 },
    runs: [
      { file: "a.wav", level_dB: 76, kind: "short-term", drive_dB: 76, channel: 1 },
      { file: "b.wav", level_dB: 96, kind: "short-term", sweeps: 1, period_s: 1.4 },
    ],
    settings: { criteria: [{ thd_percent: 3 }, { compression_dB: 1 }] },
  };

  /** Paths of everything that holds a single value. */
  function toPaths(value: unknown, path: (string | number)[] = []): (string | number)[][] {
    if (typeof value !== "object" || value === null) return [path];
    return Object.entries(value).flatMap(([key, inner]) =>
      toPaths(inner, [...path, Array.isArray(value) ? Number(key) : key]),
    );
  }

  /** From what stood there. */
  type Change = (was: unknown) => unknown;
  const change: fc.Arbitrary<Change> = fc.oneof(
    fc.double({ min: 0.3, max: 3, noNaN: true }).map(
      (by): Change =>
        (was) =>
          typeof was === "number" ? was * by : was,
    ),
    fc
      .oneof(
        fc.constantFrom(0, -1, 1, 1e-300, 1e-9, 0.5, 7999, 8000, 16_001, 384_000, 1e9, 1e300, 1.5),
        fc.constantFrom(null, "", "b.wav", "gated", "long-term", "closing", "in-room", [], {}),
        fc.double(),
      )
      .map(
        (to): Change =>
          () =>
            to,
      ),
  );
  const edits = fc.array(fc.tuple(fc.constantFrom(...toPaths(series)), change), {
    minLength: 1,
    maxLength: 3,
  });

  it("gives a result that fits its schema, or a typed error", async () => {
    let analysed = 0;
    await fc.assert(
      fc.asyncProperty(edits, async (changes) => {
        const bent: unknown = structuredClone(series);
        for (const [path, to] of changes) {
          let inner = bent as Record<string | number, unknown>;
          for (const step of path.slice(0, -1)) {
            if (typeof inner[step] !== "object" || inner[step] === null) return;
            inner = inner[step] as Record<string | number, unknown>;
          }
          const key = path.at(-1) ?? "";
          inner[key] = to(inner[key]);
        }
        await settle(async () => {
          const parsed = parseSeries(JSON.stringify(bent));
          const text = toResultText(await analyseSeries(parsed, source()));
          expect(text.length).toBeGreaterThan(1000);
          analysed += 1;
        });
      }),
      { numRuns: 150, seed: SEED },
    );
    expect(analysed).toBeGreaterThan(15);
    expect(process.resourceUsage().maxRSS).toBeLessThan(MOST_KIB);
  });
});
