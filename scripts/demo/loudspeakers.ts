/** The invented loudspeakers of the demo labs, each with a truth of its own. */
import type { VirtualLoudspeaker } from "./virtual-loudspeaker";

export const LOUDSPEAKERS = {
  /** A limiter holds the bass; everything else is free. */
  osier8a: {
    ways: [
      {
        fromHz: null,
        toHz: 1900,
        bassLimiter: {
          belowHz: 75,
          thresholdDb: 93.5,
          slope: 0.04,
          kneeDb: 1,
          detectorS: 0.02,
          attackS: 0.004,
          releaseS: 0.03,
        },
        driver: {
          resonanceHz: 42,
          q: 0.72,
          motor: { levelDb: 118, frequencyHz: 50, offset: 0.04 },
        },
      },
      { fromHz: 1900, toHz: null, driver: { levelDb: 102, second: 0.006, third: 0.002 } },
    ],
    response: [
      { frequencyHz: 140, q: 1.2, gainDb: 0.8 },
      { frequencyHz: 1700, q: 2, gainDb: -1.1 },
      { frequencyHz: 7300, q: 1.5, gainDb: 1.2 },
    ],
  },
  /** The younger sister, halfway through its recordings. */
  osier5a: {
    ways: [
      {
        fromHz: null,
        toHz: 2300,
        bassLimiter: {
          belowHz: 110,
          thresholdDb: 89,
          slope: 0.05,
          kneeDb: 2,
          detectorS: 0.02,
          attackS: 0.004,
          releaseS: 0.03,
        },
        driver: {
          resonanceHz: 54,
          q: 0.75,
          motor: { levelDb: 112, frequencyHz: 60, offset: 0.05 },
        },
      },
      { fromHz: 2300, toHz: null, driver: { levelDb: 102, second: 0.008, third: 0.003 } },
    ],
    response: [{ frequencyHz: 1200, q: 1.4, gainDb: -0.9 }],
  },
  /** A small woofer runs out of excursion: overload in the bass. */
  brackenMini: {
    ways: [
      {
        fromHz: null,
        toHz: 2600,
        driver: {
          resonanceHz: 78,
          q: 0.8,
          motor: { levelDb: 105.5, frequencyHz: 80, offset: 0.08 },
        },
      },
      { fromHz: 2600, toHz: null, driver: { levelDb: 102, second: 0.01, third: 0.004 } },
    ],
    response: [
      { frequencyHz: 900, q: 1, gainDb: 1.4 },
      { frequencyHz: 3100, q: 2.5, gainDb: -1.5 },
    ],
  },
  /** Large and at ease: nothing gives out up to 102 dB. */
  harbourTwo: {
    ways: [
      {
        fromHz: null,
        toHz: 320,
        driver: {
          resonanceHz: 30,
          q: 0.68,
          motor: { levelDb: 124, frequencyHz: 40, offset: 0.03 },
        },
      },
      { fromHz: 320, toHz: 2700, driver: { levelDb: 102, second: 0.003, third: 0.0012 } },
      { fromHz: 2700, toHz: null, driver: { levelDb: 102, second: 0.004, third: 0.0015 } },
    ],
    response: [
      { frequencyHz: 250, q: 1, gainDb: 0.7 },
      { frequencyHz: 4400, q: 1.8, gainDb: -0.8 },
    ],
  },
  /** Battery and 3 inches: the bass boost is withdrawn from the quietest run on, and a limiter holds the rest. */
  samphire3: {
    ways: [
      {
        fromHz: null,
        toHz: 240,
        limiter: {
          thresholdDb: 60,
          slope: 0.62,
          kneeDb: 4,
          detectorS: 0.015,
          attackS: 0.004,
          releaseS: 0.02,
        },
        driver: {
          resonanceHz: 95,
          q: 0.9,
          motor: { levelDb: 108, frequencyHz: 100, offset: 0.06 },
        },
      },
      {
        fromHz: 240,
        toHz: null,
        limiter: {
          thresholdDb: 79.5,
          slope: 0.1,
          kneeDb: 2,
          detectorS: 0.01,
          attackS: 0.003,
          releaseS: 0.02,
        },
        driver: { levelDb: 86, second: 0.012, third: 0.005 },
      },
    ],
    response: [
      { frequencyHz: 700, q: 0.9, gainDb: 1.8 },
      { frequencyHz: 5200, q: 2, gainDb: -2.2 },
    ],
  },
  /** Motors that heat: little lost within a sweep, more after ten minutes. */
  loom6: {
    ways: [
      {
        fromHz: null,
        toHz: 2200,
        coil: { levelDb: 102, coilK: 4, magnetK: 600, coilS: 12, magnetS: 1700 },
        driver: {
          resonanceHz: 48,
          q: 0.74,
          motor: { levelDb: 113, frequencyHz: 50, offset: 0.08 },
        },
      },
      {
        fromHz: 2200,
        toHz: null,
        coil: { levelDb: 102, coilK: 2, magnetK: 300, coilS: 0.84, magnetS: 390 },
        driver: { levelDb: 102, second: 0.007, third: 0.003 },
      },
    ],
    response: [
      { frequencyHz: 180, q: 1.1, gainDb: -0.7 },
      { frequencyHz: 2400, q: 2.2, gainDb: -1.3 },
    ],
  },
  /** A port too narrow for its tuning: the air turns turbulent around 52 Hz. */
  fennel5: {
    ways: [
      {
        fromHz: null,
        toHz: 2100,
        driver: {
          resonanceHz: 50,
          q: 0.42,
          motor: { levelDb: 113, frequencyHz: 60, offset: 0.05 },
          port: { tuningHz: 52, compliance: 1.4, q: 14, levelDb: 103, turbulentQ: 3 },
        },
      },
      { fromHz: 2100, toHz: null, driver: { levelDb: 102, second: 0.008, third: 0.003 } },
    ],
    response: [{ frequencyHz: 1500, q: 1.6, gainDb: -1 }],
  },
  /** For stages: loud, with one limiter over everything. */
  ketch12: {
    ways: [
      {
        fromHz: null,
        toHz: 1500,
        driver: { resonanceHz: 52, q: 0.7, motor: { levelDb: 134, frequencyHz: 60, offset: 0.05 } },
      },
      { fromHz: 1500, toHz: null, driver: { levelDb: 118, second: 0.01, third: 0.003 } },
    ],
    limiter: {
      thresholdDb: 106,
      slope: 0.08,
      kneeDb: 3,
      detectorS: 0.01,
      attackS: 0.003,
      releaseS: 0.02,
    },
    response: [{ frequencyHz: 2900, q: 1.3, gainDb: 1.5 }],
  },
} as const satisfies Record<string, VirtualLoudspeaker>;
export type LoudspeakerKey = keyof typeof LOUDSPEAKERS;
