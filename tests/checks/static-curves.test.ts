/** Static curves, clipped sines and hot coils against docs/check-values.md sections 5, 10 and 11. */
import { describe, expect, it } from "vitest";
import {
  OVERLOAD_LAWS,
  gainRidingExcessDb,
  gainRidingLossDb,
  overloadHarmonic,
  overloadLossDb,
  twoPathExcessDb,
  twoPathLossDb,
} from "@/lib/analysis/onset/static-laws";
import { toHeatLossDb } from "@/scripts/demo/coil";

describe("gain riding, worked checks 39 and 40 (Giannoulis et al. 2012)", () => {
  it.each([
    // ratio, input, output
    [4, -13, -13],
    [4, -10, -10.5625],
    [4, -7, -9.25],
    [4, 0, -7.5],
    [Infinity, -10, -10.75],
    [Infinity, -7, -10],
    [Infinity, 0, -10],
  ])("ratio %f: input %f dB gives %f dB", (ratio, input, output) => {
    expect(input - gainRidingLossDb(input + 10, 6, 1 / ratio)).toBeCloseTo(output, 9);
  });

  it("takes (1 - 1/R) W / 8 at the threshold itself (section 10)", () => {
    for (const [ratio, knee] of [
      [2, 4],
      [4, 6],
      [20, 12],
    ] as const) {
      expect(gainRidingLossDb(0, knee, 1 / ratio)).toBeCloseTo(((1 - 1 / ratio) * knee) / 8, 12);
    }
  });

  it("inverts every law", () => {
    for (const loss of [0.1, 1 / 3, 1, 3]) {
      for (const knee of [0, 2, 12]) {
        for (const slope of [0, 0.3, 0.7]) {
          expect(gainRidingLossDb(gainRidingExcessDb(loss, knee, slope), knee, slope)).toBeCloseTo(
            loss,
            9,
          );
        }
      }
      expect(twoPathLossDb(twoPathExcessDb(loss, 0.5), 0.5)).toBeCloseTo(loss, 9);
    }
    expect(twoPathExcessDb(3, 0.2)).toBe(Infinity);
  });
});

describe("symmetric clipping, section 5", () => {
  it.each([
    // level of clipping, H1 dB, H3 %, H5 %, H7 %
    [0.9, -0.331, 3.2863, 2.2873, 1.1955],
    [0.7, -1.81, 13.3276, 2.4523, 1.9755],
    [0.5, -4.308, 22.6326, 4.5265, 1.6166],
  ])("at %f of the peak (worked checks 24 to 26)", (level, h1Db, h3, h5, h7) => {
    const drive = 1 / level;
    // Printed to 0.001 dB and 0.0001 %; a corner in the wave limits the quadrature to 0.002 %.
    expect(Math.abs(-overloadLossDb("hard clip", 20 * Math.log10(drive)) - h1Db)).toBeLessThan(
      0.0006,
    );
    const first = overloadHarmonic("hard clip", drive, 1, 20_000);
    for (const [order, percent] of [
      [3, h3],
      [5, h5],
      [7, h7],
    ] as const) {
      const harmonic = overloadHarmonic("hard clip", drive, order, 20_000);
      expect(Math.abs(100 * Math.abs(harmonic / first) - percent)).toBeLessThan(0.002);
    }
  });
});

describe("smooth overload", () => {
  it("makes the third harmonic of its polynomial: x - (4/27) x^3 at amplitude 1 (section 5)", () => {
    // H1 = 1 - 3/4 * 4/27, H3 = 1/4 * 4/27
    expect(overloadHarmonic("cubic", 1, 1)).toBeCloseTo(1 - 1 / 9, 9);
    expect(overloadHarmonic("cubic", 1, 3)).toBeCloseTo(-1 / 27, 9);
  });

  it.each(OVERLOAD_LAWS)("%s: odd distortion of a third of the amplitude lost, at least", (law) => {
    for (const excessDb of [0.5, 2, 4, 8, 12]) {
      const amplitude = 10 ** (excessDb / 20);
      const first = overloadHarmonic(law, amplitude, 1, 2000);
      const odd = [3, 5, 7, 9].map(
        (order) => overloadHarmonic(law, amplitude, order, 2000) / first,
      );
      const lost = 1 - 10 ** (-overloadLossDb(law, excessDb, 2000) / 20);
      // Arctangent has exactly 1/3 in H3 alone (docs/onset-notes.md section 5).
      expect(Math.hypot(...odd) / lost).toBeGreaterThan(0.3333);
    }
  });
});

describe("voice coil, section 11 and worked check 42", () => {
  it.each([
    [10, 0.33, 0.006],
    [25, 0.81, 0.006],
    [50, 1.558, 0.001],
    [75, 2.24, 0.006],
    [100, 2.879, 0.001],
    [150, 4.03, 0.006],
    [200, 5.038, 0.001],
    [250, 5.94, 0.006],
  ])("%f K hotter: %f dB", (riseK, lossDb, tolerance) => {
    expect(Math.abs(toHeatLossDb(riseK) - lossDb)).toBeLessThan(tolerance);
  });

  it("worked check 43: 10 W into 5.9 K/W, 21.24 s and 4.1 K/W, 1115.2 s", () => {
    const riseK = (t: number) => 59 * (1 - Math.exp(-t / 21.24)) + 41 * (1 - Math.exp(-t / 1115.2));
    for (const [t, k, db] of [
      [1, 2.75, 0.093],
      [60, 57.65, 1.774],
      [3600, 98.38, 2.839],
    ] as const) {
      expect(Math.abs(riseK(t) - k)).toBeLessThan(0.01);
      expect(Math.abs(toHeatLossDb(riseK(t)) - db)).toBeLessThan(0.001);
    }
  });
});
