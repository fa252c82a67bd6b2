import { describe, expect, it } from "vitest";
import { fitSlopeBesideCrossovers, type DelayPoint } from "./crossover-delay";

/** Phase of the sum of a 24 dB crossover's halves: (s^2 - s sqrt2 + 1)/(s^2 + s sqrt2 + 1). */
const secondOrder = (ratio: number): number =>
  -2 * Math.atan2(Math.SQRT2 * ratio, 1 - ratio * ratio);
const firstOrder = (ratio: number): number => -2 * Math.atan(ratio);

/** Group delay by differences of the phase, so that it is not the formula under test. */
function delayOf(phase: (ratio: number) => number, crossoverHz: number, hz: number): number {
  const step = hz * 1e-4;
  const turn = phase((hz + step) / crossoverHz) - phase((hz - step) / crossoverHz);
  const whole = turn > Math.PI ? turn - 2 * Math.PI : turn;
  return -whole / (2 * Math.PI * 2 * step);
}

interface Row {
  name: string;
  crossovers: { hz: number; phase: (ratio: number) => number }[];
  slopeS: number;
  /** Delay that is neither, s at 300 Hz, falling with frequency. */
  odd?: number;
  within: number;
}

// 1e-4 s per e-fold are 125 ppm in a sweep of 5.5 s over three decades.
const ROWS: Row[] = [
  { name: "nothing", crossovers: [], slopeS: 0, within: 1e-12 },
  { name: "a clock alone", crossovers: [], slopeS: -1e-4, within: 1e-9 },
  {
    name: "one crossover",
    crossovers: [{ hz: 2130, phase: secondOrder }],
    slopeS: 0,
    within: 1e-6,
  },
  {
    name: "one of first order",
    crossovers: [{ hz: 1740, phase: firstOrder }],
    slopeS: 0,
    within: 1e-6,
  },
  {
    name: "two crossovers",
    crossovers: [
      { hz: 317, phase: secondOrder },
      { hz: 2750, phase: secondOrder },
    ],
    slopeS: 0,
    within: 1e-6,
  },
  {
    name: "two crossovers and a fast clock",
    crossovers: [
      { hz: 317, phase: secondOrder },
      { hz: 2750, phase: secondOrder },
    ],
    slopeS: -1e-4,
    within: 2e-6,
  },
  {
    name: "one crossover and a slow clock",
    crossovers: [{ hz: 1500, phase: secondOrder }],
    slopeS: 1.5e-4,
    within: 2e-6,
  },
  {
    name: "a crossover, a clock and an odd delay in the bass",
    crossovers: [{ hz: 2400, phase: secondOrder }],
    slopeS: -1e-4,
    odd: 1e-4,
    within: 5e-6,
  },
];

describe("fitSlopeBesideCrossovers", () => {
  it.each(ROWS)("finds the clock beside $name", ({ crossovers, slopeS, odd = 0, within }) => {
    const points: DelayPoint[] = Array.from({ length: 128 }, (_, i) => {
      const hz = 300 * 2 ** (i / 24);
      const own = crossovers.reduce((sum, c) => sum + delayOf(c.phase, c.hz, hz), 0);
      return {
        lnHz: Math.log(hz),
        delayS: 1e-3 + own + slopeS * Math.log(hz) + odd * (300 / hz) ** 2,
      };
    });
    expect(Math.abs(fitSlopeBesideCrossovers(points) - slopeS)).toBeLessThan(within);
  });
});
