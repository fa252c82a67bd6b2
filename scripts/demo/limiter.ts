/** Gain riding: what a loudspeaker's signal processing does against too much level. */
import type { Stage } from "./filters";

export interface LimiterSetting {
  /** Level above which it acts, dB on the scale of a run's level. */
  thresholdDb: number;
  /** d(out)/d(in) above: 0 holds a ceiling. */
  slope: number;
  /** Width of the quadratic knee, dB. */
  kneeDb: number;
  /** Time constants of the gain, s; the detector is an rms of `detectorS`. */
  detectorS: number;
  attackS: number;
  releaseS: number;
}

/**
 * Static curve: input level to gain, dB, never above 0.
 * @see docs/onset-notes.md section 2
 */
export function toGainDb(levelDb: number, { thresholdDb, slope, kneeDb }: LimiterSetting): number {
  const over = levelDb - thresholdDb;
  if (2 * over >= kneeDb) return (slope - 1) * over;
  if (2 * over <= -kneeDb) return 0;
  return ((slope - 1) * (over + kneeDb / 2) ** 2) / (2 * kneeDb);
}

export class Limiter implements Stage {
  private meanSquare = 0;
  private gain = 1;
  private readonly kneeStart: number;
  private readonly detector: number;
  private readonly attack: number;
  private readonly release: number;

  /** @param unit mean square of a sine at 0 dB on the threshold's scale. */
  constructor(
    private readonly setting: LimiterSetting,
    private readonly unit: number,
    rateHz: number,
  ) {
    this.kneeStart = unit * 10 ** ((setting.thresholdDb - setting.kneeDb / 2) / 10);
    this.detector = toShare(setting.detectorS, rateHz);
    this.attack = toShare(setting.attackS, rateHz);
    this.release = toShare(setting.releaseS, rateHz);
  }

  process(block: Float64Array): void {
    let { meanSquare, gain } = this;
    for (let n = 0; n < block.length; n += 1) {
      const x = block[n] ?? 0;
      meanSquare += this.detector * (x * x - meanSquare);
      const wished = meanSquare > this.kneeStart ? this.toGain(meanSquare) : 1;
      gain += (wished < gain ? this.attack : this.release) * (wished - gain);
      block[n] = x * gain;
    }
    this.meanSquare = meanSquare;
    this.gain = gain;
  }

  private toGain(meanSquare: number): number {
    return 10 ** (toGainDb(10 * Math.log10(meanSquare / this.unit), this.setting) / 20);
  }
}

const toShare = (timeConstantS: number, rateHz: number): number =>
  1 - Math.exp(-1 / (timeConstantS * rateHz));
