import { describe, expect, it } from "vitest";
import { toByteSource } from "./byte-source";
import { readAudioHead } from "./read-audio-head";
import { writeWav } from "./write-wav";

const tone = Float64Array.from({ length: 480 }, (_, n) => Math.sin(n / 10) / 2);
const read = (bytes: Uint8Array, channel = 1) =>
  readAudioHead(toByteSource(bytes), "76.wav", channel);

describe("readAudioHead", () => {
  it.each(["pcm16", "pcm24", "pcm32", "float32", "float64"] as const)(
    "takes %s",
    async (format) => {
      await expect(read(writeWav([tone], 48_000, format))).resolves.toBe("audio/wav");
    },
  );

  it.each([
    ["cut", writeWav([tone], 48_000).subarray(0, 500), 1, "audio.truncated"],
    ["without that channel", writeWav([tone], 48_000), 2, "audio.channel-missing"],
    [
      "of no numbers",
      writeWav([tone.map(() => NaN)], 48_000, "float32"),
      1,
      "audio.format-unsupported",
    ],
    ["of no bytes", new Uint8Array(), 1, "audio.empty"],
  ] as const)("refuses a file %s", async (_name, bytes, channel, code) => {
    await expect(read(bytes, channel)).rejects.toMatchObject({ code, file: "76.wav" });
  });
});
