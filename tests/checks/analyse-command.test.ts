/** What the built analysis command prints, refuses and leaves. */
import {
  existsSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  statSync,
  symlinkSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { resultSchema } from "../../lib/result/result-schema";
import { toResultText } from "../../lib/result/result-text";
import { createFolderSource, readSeriesText } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import { bundlePath, ensureBundle, listBundles } from "../../scripts/setup/bundles.mjs";
import { startMeasuringThread } from "../../scripts/threads/measuring-thread";
import { runAnalyse, type CommandOutcome } from "../support/analyse-command";
import { writeSeriesFolder } from "../support/series-folder";

const root = mkdtempSync(join(tmpdir(), "analyse-"));
const folder = join(root, "series");
let series: Record<string, unknown>;

const run = (...args: string[]): Promise<CommandOutcome> => runAnalyse(root, ...args);

/** The last line of standard error. */
const toFault = ({ stderr }: CommandOutcome): { code: string; message: string; file?: string } =>
  JSON.parse(stderr.trimEnd().split("\n").at(-1) ?? "") as {
    code: string;
    message: string;
    file?: string;
  };

async function runWith(text: string): Promise<CommandOutcome> {
  writeFileSync(join(folder, "series.json"), text);
  try {
    return await run(folder);
  } finally {
    writeFileSync(join(folder, "series.json"), JSON.stringify(series));
  }
}

beforeAll(async () => {
  const bundle = listBundles().find(({ name }) => name === "analyse");
  if (bundle === undefined) throw new Error("there is no entry for the analysis command");
  await ensureBundle(bundle);
  const toAmplitude = (levelDb: number): number => 0.3 * 10 ** ((levelDb - 102) / 20);
  series = writeSeriesFolder(folder, {
    levels: [76, 86, 96, 102],
    device: (levelDb) => ({
      amplitudes: (f) => [toAmplitude(levelDb - Math.max(0, levelDb - 93) / (1 + (f / 150) ** 4))],
    }),
  });
}, 60_000);

afterAll(() => rmSync(root, { recursive: true }));

describe("analyse <folder>", () => {
  it("prints the result, the same bytes every time, to standard output or a file", async () => {
    const first = await run(folder);
    expect([first.code, first.stderr]).toEqual([0, ""]);
    const result = resultSchema.parse(JSON.parse(first.stdout));
    expect(result.runs.map((r) => r.file)).toEqual(["76.wav", "86.wav", "96.wav", "102.wav"]);
    expect(result.runs[0]?.spl_dB).toHaveLength(result.grid_Hz.length);
    expect(first.stdout.endsWith("}\n")).toBe(true);
    const second = await run(folder, "--out", "again.json");
    expect([second.code, second.stdout]).toEqual([0, ""]);
    expect(readFileSync(join(root, "again.json"), "utf8")).toBe(first.stdout);
  });

  it("finds the bass limiter that is in the recordings, and nothing above it", async () => {
    const { bands } = resultSchema.parse(JSON.parse((await run(folder)).stdout));
    const at = (nominal: number) => bands.find((b) => b.nominal_Hz === nominal);
    expect(at(50)?.onset.status).toBe("found");
    // Loss of the device at 50 Hz: 1/3 dB where 0.988 (u - 93) = 1/3.
    expect(at(50)?.onset.low_dB).toBeLessThanOrEqual(93.34);
    expect(at(50)?.onset.high_dB).toBeGreaterThanOrEqual(93.34);
    expect(at(2000)?.onset.status).toBe("not reached");
    expect(at(50)?.levels.at(-1)?.compression_dB).toBeCloseTo(9 / (1 + (50.12 / 150) ** 4), 1);
  });

  it.each<[string, (s: Record<string, unknown>) => string, string]>([
    [
      "a key that is not known, by name",
      (s) => JSON.stringify({ ...s, colour: "red" }),
      "series.unknown-key",
    ],
    [
      "a key deep inside",
      (s) => JSON.stringify({ ...s, stimulus: { ...(s.stimulus as object), fade_s: 1 } }),
      "series.unknown-key",
    ],
    ["what is no JSON", () => "{ // a comment\n}", "series.not-json"],
    ["a wrong type", (s) => JSON.stringify({ ...s, distance_m: "1" }), "series.invalid"],
    [
      "no calibration",
      (s) => JSON.stringify({ ...s, calibration: undefined }),
      "calibration.missing",
    ],
    [
      "a name that leaves the folder",
      (s) => JSON.stringify({ ...s, ambient: { file: "../76.wav" } }),
      "series.file-name",
    ],
    [
      "a file that is not there",
      (s) => JSON.stringify({ ...s, ambient: { file: "room.wav" } }),
      "series.file-missing",
    ],
    [
      "no short-term run",
      (s) => JSON.stringify({ ...s, runs: [{ file: "76.wav", level_dB: 76, kind: "closing" }] }),
      "series.reference-missing",
    ],
    [
      "a channel that is not there",
      (s) => JSON.stringify({ ...s, runs: [{ file: "76.wav", level_dB: 76, channel: 3 }] }),
      "audio.channel-missing",
    ],
    [
      "room noise in place of a run",
      (s) => JSON.stringify({ ...s, runs: [{ file: "ambient.wav", level_dB: 76 }] }),
      "run.no-sweep",
    ],
    [
      "another rate",
      (s) => JSON.stringify({ ...s, stimulus: { ...(s.stimulus as object), rate_Hz: 44_100 } }),
      "stimulus.rate",
    ],
    [
      "a sweep in place of the calibrator",
      (s) => JSON.stringify({ ...s, calibration: { file: "76.wav", level_dB: 94 } }),
      "calibration.not-a-tone",
    ],
  ])("refuses %s with exit 2 and one line of JSON", async (_, change, code) => {
    const outcome = await runWith(change(series));
    expect([outcome.code, outcome.stdout]).toEqual([2, ""]);
    expect(toFault(outcome).code).toBe(code);
    expect(toFault(outcome).message.length).toBeGreaterThan(20);
  });

  it("names the unknown key", async () => {
    const outcome = await runWith(JSON.stringify({ ...series, colour: "red" }));
    expect(toFault(outcome).message).toContain("colour");
  });

  it("refuses a broken recording by its name and writes nothing", async () => {
    writeFileSync(
      join(folder, "broken.wav"),
      readFileSync(join(folder, "76.wav")).subarray(0, 100_000),
    );
    writeFileSync(
      join(folder, "series.json"),
      JSON.stringify({ ...series, runs: [{ file: "broken.wav", level_dB: 76 }] }),
    );
    const outcome = await run(folder, "--out", "none.json");
    writeFileSync(join(folder, "series.json"), JSON.stringify(series));
    expect(outcome.code).toBe(2);
    expect(toFault(outcome)).toMatchObject({ code: "audio.truncated", file: "broken.wav" });
    expect(existsSync(join(root, "none.json"))).toBe(false);
  });

  it("refuses a link out of the folder", async () => {
    writeFileSync(join(root, "outside.wav"), readFileSync(join(folder, "76.wav")));
    symlinkSync(join(root, "outside.wav"), join(folder, "link.wav"));
    const outcome = await runWith(
      JSON.stringify({ ...series, runs: [{ file: "link.wav", level_dB: 76 }] }),
    );
    expect(toFault(outcome).code).toBe("series.file-name");
  });

  it.each([[[]], [["a", "b"]], [["no-such-folder"]], [[".", "--verbose"]]])(
    "refuses arguments %j",
    async (args) => {
      const outcome = await run(...args);
      expect([outcome.code, outcome.stdout]).toEqual([2, ""]);
      expect(toFault(outcome).code).toMatch(/^[a-z-]+\.[a-z-]+$/);
    },
  );

  it.each([
    ["series.json"],
    ["102.wav"],
    ["calibrator.wav"],
    ["ambient.wav"],
    [join("..", "series", "76.wav")],
  ])("never writes its result over an input: %s", async (file) => {
    const path = join(folder, file);
    const before = readFileSync(path);
    const outcome = await run(folder, "--out", path);
    expect([outcome.code, outcome.stdout]).toEqual([2, ""]);
    expect(toFault(outcome)).toMatchObject({ code: "request.invalid" });
    expect(readFileSync(path).equals(before)).toBe(true);
  });

  it.each([
    ["a folder that is not there", join("none", "result.json")],
    ["a folder in place of a file", "series"],
  ])("refuses %s as --out before it begins", async (_, out) => {
    const outcome = await run(folder, "--out", out);
    expect([outcome.code, outcome.stdout]).toEqual([2, ""]);
    expect(toFault(outcome)).toMatchObject({ code: "request.invalid" });
    expect(toFault(outcome).message).toContain("--out");
  });
});

describe("a second thread that measures half of the runs", () => {
  const analyse = async (helped: boolean): Promise<string> => {
    const thread = startMeasuringThread(bundlePath("analyse"));
    try {
      const helper = helped ? thread.helperFor(folder) : undefined;
      const text = readSeriesText(folder);
      return toResultText(
        await analyseSeries(parseSeries(text), createFolderSource(folder), { helper }),
      );
    } finally {
      await thread.close();
    }
  };

  it("changes no byte of the result", async () => {
    expect(await analyse(true)).toBe(await analyse(false));
  });

  it("says what is wrong with a recording as the first thread would", async () => {
    const file = join(folder, "102.wav");
    const whole = readFileSync(file);
    writeFileSync(file, whole.subarray(0, whole.length / 2));
    try {
      const [alone, helped] = await Promise.allSettled([analyse(false), analyse(true)]);
      expect(helped).toMatchObject({
        status: "rejected",
        reason: { code: "audio.truncated", file: "102.wav" },
      });
      const toMessage = (end: PromiseSettledResult<string>): unknown =>
        end.status === "rejected" && end.reason instanceof Error && end.reason.message;
      expect(toMessage(helped)).toBe(toMessage(alone));
    } finally {
      writeFileSync(file, whole);
    }
  });
});

describe("the built command", () => {
  it("carries no languages of messages that nobody reads: it starts with every series", () => {
    // 450 kB; with every language of zod (an import of its `z`) 880 kB.
    expect(statSync(bundlePath("analyse")).size).toBeLessThan(600_000);
  });
});
