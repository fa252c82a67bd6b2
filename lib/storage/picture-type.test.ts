import { describe, expect, it } from "vitest";
import { toPictureType } from "./picture-type";

const bytes = (text: string) => Uint8Array.from(text, (letter) => letter.charCodeAt(0));

describe("toPictureType", () => {
  it.each([
    ["\xFF\xD8\xFF\xE0 JFIF", "image/jpeg"],
    ["\x89PNG\r\n\x1A\n....", "image/png"],
    ["RIFF....WEBPVP8 ", "image/webp"],
  ])("knows %j", (text, type) => {
    expect(toPictureType(bytes(text))).toBe(type);
  });

  it.each(["", "<svg xmlns=''>", "<html>", "GIF89a", "RIFF....WAVEfmt ", "\xFF\xD8"])(
    "refuses %j",
    (text) => {
      expect(() => toPictureType(bytes(text))).toThrow(/no JPEG, PNG or WebP/);
    },
  );
});
