import { describe, expect, it } from "vitest";
import { writeWav } from "../audio/write-wav";
import { PEEK_BYTES, peekAudio } from "./peek-audio";

const text = (words: string) => new TextEncoder().encode(words);

describe("peekAudio", () => {
  it("lets the beginning of a WAV through, although most of it is still to come", () => {
    const head = writeWav([new Float64Array(100)], 48_000).subarray(0, PEEK_BYTES);
    expect(() => peekAudio(head, "76.wav")).not.toThrow();
  });

  it("lets FLAC through", () => {
    expect(() => peekAudio(text("fLaC\0\0\0\x22\x10\0\x10\0"), "76.flac")).not.toThrow();
  });

  it.each([
    ["text", text("Level 76 dB\n"), "audio.not-audio"],
    ["a picture", text("\x89PNG\r\n\x1A\n\0\0\0\r"), "audio.not-audio"],
    ["an MP4", text("\0\0\0\x18ftypmp42"), "audio.format-unsupported"],
    ["a few bytes", text("RI"), "audio.not-audio"],
    ["a RIFF of another kind", text("RIFF\0\0\0\0AVI "), "audio.not-audio"],
  ])("refuses %s by name", (_name, head, code) => {
    expect(() => peekAudio(head, "take one.wav")).toThrow(
      expect.objectContaining({ code, file: "take one.wav" }) as Error,
    );
  });
});
