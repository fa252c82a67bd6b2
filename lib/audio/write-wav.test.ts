import { describe, expect, it } from "vitest";
import { writeWav } from "./write-wav";

describe("writeWav", () => {
  it.each([
    ["pcm16", 1, 16],
    ["pcm24", 1, 24],
    ["pcm32", 1, 32],
    ["float32", 3, 32],
    ["float64", 3, 64],
  ] as const)("%s carries its tag and width", (format, tag, bits) => {
    const view = new DataView(
      writeWav(
        [
          [0, 0.5, -0.5],
          [0, 0, 0],
        ],
        44_100,
        format,
      ).buffer,
    );
    expect([
      view.getUint16(20, true),
      view.getUint16(22, true),
      view.getUint32(24, true),
      view.getUint16(34, true),
    ]).toEqual([tag, 2, 44_100, bits]);
    expect(view.getUint32(40, true)).toBe((3 * 2 * bits) / 8);
    expect(view.byteLength).toBe(view.getUint32(4, true) + 8);
  });

  it("rounds 24-bit samples to nearest and holds them at the ends of the range", () => {
    const bytes = writeWav([[0.5, -1, 1, 1.2 / 0x800000]], 48_000, "pcm24");
    expect([...bytes.subarray(44)]).toEqual([0, 0, 0x40, 0, 0, 0x80, 0xff, 0xff, 0x7f, 1, 0, 0]);
  });

  it("pads odd data to even length without counting the pad", () => {
    const bytes = writeWav([[0.25]], 48_000, "pcm24");
    expect(bytes).toHaveLength(48);
    expect(new DataView(bytes.buffer).getUint32(40, true)).toBe(3);
  });

  it("refuses channels of different length", () => {
    expect(() => writeWav([[0], [0, 0]], 48_000)).toThrow(
      expect.objectContaining({ code: "analysis.argument" }),
    );
  });
});
