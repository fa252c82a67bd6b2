/** Static devices with a known onset, drawn at random: the truth that the estimator is held against. */
import {
  gainRidingExcessDb,
  gainRidingLossDb,
  overloadHarmonic,
  overloadLossDb,
  twoPathExcessDb,
  twoPathLossDb,
  type OverloadLaw,
} from "@/lib/analysis/onset/static-laws";
import type { SeededRandom } from "./seeded-random";

export interface StaticDevice {
  lossDb: (driveDb: number) => number;
  /** Drive at which 1/3 dB is lost. */
  onsetDb: number;
  /** Amplitude of an odd harmonic re the fundamental; 0 where the device makes none. */
  harmonic: (driveDb: number, order: number) => number;
}

const silent = () => 0;

export function gainRider(thetaDb: number, kneeDb: number, slope: number): StaticDevice {
  return {
    lossDb: (drive) => gainRidingLossDb(drive - thetaDb, kneeDb, slope),
    onsetDb: thetaDb + gainRidingExcessDb(1 / 3, kneeDb, slope),
    harmonic: silent,
  };
}

export function twoPaths(thetaDb: number, share: number): StaticDevice {
  return {
    lossDb: (drive) => twoPathLossDb(drive - thetaDb, share),
    onsetDb: thetaDb + twoPathExcessDb(1 / 3, share),
    harmonic: silent,
  };
}

export function overload(law: OverloadLaw, limitDb: number): StaticDevice {
  let low = limitDb - 40;
  let high = limitDb + 40;
  while (high - low > 1e-6) {
    const middle = (low + high) / 2;
    if (overloadLossDb(law, middle - limitDb) < 1 / 3) low = middle;
    else high = middle;
  }
  return {
    lossDb: (drive) => overloadLossDb(law, drive - limitDb),
    onsetDb: low,
    harmonic: (drive, order) => {
      if (order % 2 === 0) return 0;
      const amplitude = 10 ** ((drive - limitDb) / 20);
      return Math.abs(
        overloadHarmonic(law, amplitude, order) / overloadHarmonic(law, amplitude, 1),
      );
    },
  };
}

/** Device classes of docs/onset-notes.md section 3, for levels up to 102 dB. */
export const DEVICE_CLASSES = {
  "hard limiter": (random) => gainRider(random.uniform(78, 99.5), 0, random.uniform(0, 0.1)),
  "limiter with a knee": (random) =>
    gainRider(random.uniform(80, 98), random.uniform(2, 14), random.uniform(0, 0.1)),
  compressor: (random) =>
    gainRider(random.uniform(78, 98), random.uniform(0, 6), 1 / random.uniform(2, 5)),
  "port-like": (random) =>
    gainRider(random.uniform(84, 97), random.uniform(8, 20), random.uniform(0.5, 0.8)),
  "two paths": (random) => twoPaths(random.uniform(80, 97), random.uniform(0.2, 0.9)),
  "hard clip": (random) => overload("hard clip", random.uniform(80, 99)),
  tanh: (random) => overload("tanh", random.uniform(84, 104)),
  cubic: (random) => overload("cubic", random.uniform(82, 102)),
} as const satisfies Record<string, (random: SeededRandom) => StaticDevice>;
export type DeviceClass = keyof typeof DEVICE_CLASSES;

/** Bands of a loudspeaker: the law belongs to the device, its threshold moves with the response. */
export const LOUDSPEAKERS = {
  "hard limiter": (random) => {
    const { thetaDb, slope } = threshold(random, 86, 98, 0, 0.1);
    return (b) => gainRider(thetaDb(b), 0, slope);
  },
  "limiter with a knee": (random) => {
    const { thetaDb, slope } = threshold(random, 86, 98, 0, 0.1);
    const kneeDb = random.uniform(4, 14);
    return (b) => gainRider(thetaDb(b), kneeDb, slope);
  },
  compressor: (random) => {
    const { thetaDb, slope } = threshold(random, 84, 96, 0.2, 0.5);
    const kneeDb = random.uniform(0, 6);
    return (b) => gainRider(thetaDb(b), kneeDb, slope);
  },
  "bass limiter with a crossover": (random) => {
    const thetaDb = random.uniform(84, 96);
    const slope = random.uniform(0, 0.1);
    const crossover = random.uniform(5, 9);
    return (b) => {
      const share = 1 / (1 + 10 ** ((b - crossover) * 0.35));
      return share > 0.97
        ? gainRider(thetaDb, 0, slope)
        : twoPaths(thetaDb, Math.max(share, 0.001));
    };
  },
  port: (random) => {
    const tuned = random.uniform(1, 4);
    const slope = random.uniform(0.5, 0.8);
    const kneeDb = random.uniform(8, 20);
    const thetaDb = random.uniform(84, 95);
    return (b) => gainRider(thetaDb + 1.2 * (b - tuned) ** 2, kneeDb, slope);
  },
  "bass that clips": (random) => {
    const limitDb = random.uniform(84, 98);
    return (b) => overload("hard clip", limitDb + 1.5 * b);
  },
  "bass that saturates": (random) => {
    const limitDb = random.uniform(86, 100);
    return (b) => overload("tanh", limitDb + 1.5 * b);
  },
} as const satisfies Record<string, (random: SeededRandom) => (b: number) => StaticDevice>;

function threshold(
  random: SeededRandom,
  lowDb: number,
  highDb: number,
  lowSlope: number,
  highSlope: number,
): { thetaDb: (b: number) => number; slope: number } {
  const middleDb = random.uniform(lowDb, highDb);
  const slope = random.uniform(lowSlope, highSlope);
  const swingDb = random.uniform(0, 3);
  const phase = random.uniform(0, 6);
  return { thetaDb: (b) => middleDb + swingDb * Math.sin(b / 4 + phase), slope };
}
