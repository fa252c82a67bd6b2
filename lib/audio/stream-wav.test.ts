import { describe, expect, it } from "vitest";
import { streamPcm24, toPcm24Bytes } from "./stream-wav";
import { writeWav } from "./write-wav";

const samples = Float64Array.from({ length: 1001 }, (_, n) => Math.sin(n));

describe("streamPcm24", () => {
  it.each([1000, 1001])("gives the bytes of the whole file for %d samples", (frames) => {
    const whole = samples.subarray(0, frames);
    const pieces = [whole.subarray(0, 333), whole.subarray(333, 334), whole.subarray(334)];
    const streamed = Buffer.concat([...streamPcm24(pieces, frames, 48_000)]);
    expect(streamed.equals(writeWav([whole], 48_000, "pcm24"))).toBe(true);
    expect(streamed).toHaveLength(toPcm24Bytes(frames));
  });

  it.each([999, 1002])("notices that %d samples were announced", (frames) => {
    expect(() => [...streamPcm24([samples], frames, 48_000)]).toThrow(/announced/);
  });

  it("refuses what a WAV cannot hold", () => {
    expect(() => [...streamPcm24([], 2 ** 31, 48_000)]).toThrow(/cannot hold/);
  });
});
