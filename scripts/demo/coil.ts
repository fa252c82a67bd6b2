/** A voice coil that heats: its resistance rises and the level falls, slowly. */
import { COPPER_PER_K } from "../../lib/analysis/voice-coil";
import type { Stage } from "./filters";

const BLOCK_S = 0.001;

export interface CoilSetting {
  /** Rise after an endless tone at `levelDb` in the way's band: of the coil over the magnet, and of the magnet. */
  levelDb: number;
  coilK: number;
  magnetK: number;
  coilS: number;
  magnetS: number;
}

/** What was played before, and how long ago. */
export interface Heating {
  /** Level of the way's share, dB on the scale of a run's level. */
  levelDb: number;
  minutes: number;
  gapS: number;
}

export class Coil implements Stage {
  private coilK = 0;
  private magnetK = 0;
  private readonly blockSamples: number;
  private readonly stepS: number;

  /** @param unit mean square of a sine at 0 dB. */
  constructor(
    private readonly setting: CoilSetting,
    private readonly unit: number,
    rateHz: number,
  ) {
    this.blockSamples = Math.max(1, Math.round(BLOCK_S * rateHz));
    this.stepS = this.blockSamples / rateHz;
  }

  /** Temperature after conditioning at a steady power. */
  heat({ levelDb, minutes, gapS }: Heating): void {
    const { coilK, magnetK, coilS, magnetS } = this.setting;
    const power = 10 ** ((levelDb - this.setting.levelDb) / 10);
    const rest = (endK: number, tauS: number): number =>
      endK * power * (1 - Math.exp((-60 * minutes) / tauS)) * Math.exp(-gapS / tauS);
    this.coilK = rest(coilK, coilS);
    this.magnetK = rest(magnetK, magnetS);
  }

  get riseK(): number {
    return this.coilK + this.magnetK;
  }

  process(block: Float64Array): void {
    const { coilK, magnetK, coilS, magnetS, levelDb } = this.setting;
    const full = this.unit * 10 ** (levelDb / 10);
    for (let start = 0; start < block.length; start += this.blockSamples) {
      const end = Math.min(block.length, start + this.blockSamples);
      const gain = 1 / (1 + COPPER_PER_K * this.riseK);
      let energy = 0;
      for (let n = start; n < end; n += 1) {
        const x = block[n] ?? 0;
        energy += x * x;
        block[n] = x * gain;
      }
      const power = energy / (end - start) / full;
      const stepS = (this.stepS * (end - start)) / this.blockSamples;
      this.coilK += (stepS / coilS) * (coilK * power - this.coilK);
      this.magnetK += (stepS / magnetS) * (magnetK * power - this.magnetK);
    }
  }
}
