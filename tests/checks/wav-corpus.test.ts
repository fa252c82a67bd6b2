/** Files by other programs are read to their last bit, and what is no recording is refused by name. */
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { toByteSource, withFileSource } from "../../lib/audio/byte-source";
import { readRecording } from "../../lib/audio/read-recording";
import { writeWav } from "../../lib/audio/write-wav";
import { AppError } from "../../lib/errors/app-error";
import { createRandom } from "../../scripts/demo/random";
import { FOREIGN_FILES } from "../support/foreign-files";
import { makeMalformedFiles } from "../support/malformed-wav";

const RATE_HZ = 44_100;

/** Below full scale: what a writer does beyond it is its own affair. */
const random = createRandom("foreign files");
const SOURCE = Float64Array.from({ length: 4411 }, () =>
  Math.max(-0.999, Math.min(0.999, 0.3 * random.normal())),
);

const codeOf = async (work: Promise<unknown>): Promise<string> => {
  try {
    await work;
    return "read";
  } catch (error) {
    return error instanceof AppError ? error.code : `crash: ${String(error)}`;
  }
};

let folder = "";
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "tidemark-corpus-"));
  writeFileSync(join(folder, "source.wav"), writeWav([SOURCE], RATE_HZ, "float64"));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe("recordings by other programs", () => {
  const read = FOREIGN_FILES.filter((f) => !("code" in f.expected));
  const refused = FOREIGN_FILES.filter((f) => "code" in f.expected);

  it.each(read)("reads $name", async ({ name, make, expected }) => {
    const path = join(folder, `${name.replaceAll(/[^a-z0-9]+/gi, "-")}.wav`);
    await make(join(folder, "source.wav"), path);
    const { recording, audio } = await withFileSource(path, (source) =>
      readRecording(source, { file: name }),
    );
    const worst = Float64Array.from(recording.samples).reduce(
      (most, x, n) => Math.max(most, Math.abs(x - (SOURCE[n] ?? NaN))),
      0,
    );
    expect(recording.rateHz).toBe(RATE_HZ);
    expect(recording.samples).toHaveLength(SOURCE.length);
    expect(audio).toMatchObject(
      "code" in expected ? {} : { channels: expected.channels, bits: expected.bits },
    );
    expect(worst).toBeLessThanOrEqual("code" in expected ? -1 : expected.within);
  });

  it.each(refused)("refuses $name by name", async ({ name, make, expected }) => {
    const path = join(folder, `${name.replaceAll(/[^a-z0-9]+/gi, "-")}.wav`);
    await make(join(folder, "source.wav"), path);
    const code = await codeOf(
      withFileSource(path, (source) => readRecording(source, { file: name })),
    );
    expect(code).toBe("code" in expected ? expected.code : "");
  });
});

describe("files that are no recording", () => {
  it.each(makeMalformedFiles())("refuses $name as $code", async ({ name, bytes, code }) => {
    expect(await codeOf(readRecording(toByteSource(bytes), { file: name }))).toBe(code);
  });

  it.each(makeMalformedFiles())("says of $name which file, and in words", async ({ bytes }) => {
    const reading = readRecording(toByteSource(bytes), { file: "take 3.wav" });
    await expect(reading).rejects.toThrow(/^take 3\.wav [a-z].{15,}[.]$/s);
  });

  it("never crashes on a recording with one byte bent, nor on one cut anywhere in its head", async () => {
    const whole = writeWav([SOURCE.subarray(0, 300)], RATE_HZ, "pcm24");
    for (let at = 0; at < 60; at += 1) {
      for (const value of [0, 1, 0x7f, 0x80, 0xff]) {
        const bent = whole.slice();
        bent[at] = value;
        expect(await codeOf(readRecording(toByteSource(bent), { file: "x.wav" }))).not.toContain(
          "crash",
        );
      }
      expect(
        await codeOf(readRecording(toByteSource(whole.slice(0, at)), { file: "x.wav" })),
      ).toMatch(/^audio\./);
    }
  });
});
