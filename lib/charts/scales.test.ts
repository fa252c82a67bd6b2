import { describe, expect, it } from "vitest";
import { isLabelledBand, toBandScale, toDbScale, toLogScale, toWallRange } from "./scales";

const EXACT_HZ = Array.from({ length: 27 }, (_, i) => 1000 * 10 ** ((i - 14) / 10));

describe("bands of equal pitch", () => {
  const bands = toBandScale(EXACT_HZ, 30);
  it("puts centres half a pitch in", () => {
    expect(bands.width).toBe(810);
    expect(bands.centre(0)).toBe(15);
    expect(bands.centre(26)).toBe(795);
    expect(bands.left(2)).toBe(60);
  });
  it.each(EXACT_HZ.map((hz, i) => [hz, i] as const))(
    "%d Hz stands in the middle of band %d",
    (hz, i) => {
      expect(bands.toX(hz)).toBeCloseTo(bands.centre(i), 9);
      expect(bands.indexAt(bands.toX(hz))).toBe(i);
      expect(bands.toHz(bands.toX(hz))).toBeCloseTo(hz, 6);
    },
  );
  it("follows the design's formula: x = pitch x (10 lg(f/1000) + 14.5)", () => {
    expect(bands.toX(2000)).toBeCloseTo(30 * (10 * Math.log10(2) + 14.5), 9);
  });
  it("keeps the index within the bands", () => {
    expect(bands.indexAt(-40)).toBe(0);
    expect(bands.indexAt(9999)).toBe(26);
  });
  it("ends at the outer edges of the outer bands", () => {
    expect(bands.toX(35.4813)).toBeCloseTo(0, 3);
    expect(bands.toX(17_782.8)).toBeCloseTo(810, 3);
  });
});

describe("decibels", () => {
  const scale = toDbScale(60, 106, 468);
  it.each([
    [106, 0],
    [60, 468],
    // One block of the staff is 2 dB: 468 / 23 px.
    [104, 20.35],
    [100, 61.04],
  ])("%d dB at %d px", (db, y) => expect(scale.toY(db)).toBeCloseTo(y, 2));
  it("ticks at the tens", () => expect(scale.ticksDb).toEqual([60, 70, 80, 90, 100]));
});

describe("range of the wall", () => {
  it.each([
    ["usual", [72, 103.4], 60, 106],
    ["stage: grown upwards", [80, 111.3], 60, 116],
    ["just under the top: air is kept", [105.2], 60, 116],
    ["small battery: grown downwards", [57.3, 96], 50, 106],
    ["nothing measured", [], 60, 106],
    ["never shrunk", [88, 90], 60, 106],
  ])("%s", (_, levels, minDb, maxDb) => expect(toWallRange(levels)).toEqual({ minDb, maxDb }));
});

describe("labels of octave bands", () => {
  it("names 63, 125 .. 16k, on phones every other one", () => {
    const nominal = [40, 50, 63, 80, 100, 125, 250, 500, 1000, 2000, 4000, 8000, 12_500, 16_000];
    expect(nominal.filter((hz) => isLabelledBand(hz))).toEqual([
      63, 125, 250, 500, 1000, 2000, 4000, 8000, 16_000,
    ]);
    expect(nominal.filter((hz) => isLabelledBand(hz, true))).toEqual([63, 250, 1000, 4000, 16_000]);
  });
});

describe("logarithm", () => {
  const scale = toLogScale(0.01, 100, 400);
  it.each([
    [0.01, 400],
    [100, 0],
    [1, 200],
  ])("%d at %d px", (value, y) => expect(scale.toY(value)).toBeCloseTo(y, 9));
});
