/** What may be said of losses that none of the laws follows. */
import { sayDb, sayRun } from "../say";
import type { Detection } from "./detect";
import type { BandGains } from "./likelihood";

export interface NoLaw {
  control: "slow control" | "several controls";
  /** In words, without a full stop. */
  reason: string;
}

/** Losses of two runs must differ by so many standard uncertainties, and by this much, dB, to contradict each other. */
const SIGMAS = 3;
const LEAST_DB = 0.1;

/**
 * Every static control, and every chain of them, loses no less when it is driven harder and gives no less output;
 * only where a limited and a free path add up they may work against each other.
 * Losses that do otherwise depend on time: slow control. Losses that only fit no single law may be two static
 * controls one behind the other, or a slow one: the levels alone cannot tell.
 *
 * @param drivesDb [levels] ascending.
 * @param isEdge whether the band lies where the reach of a control ends.
 * @see docs/onset-notes.md sections 1 and 2
 */
export function readNoLaw(
  detection: Detection,
  gains: BandGains,
  drivesDb: readonly number[],
  isEdge: boolean,
): NoLaw {
  const keys = [...detection.lossDb.keys()].filter((k) => Number.isFinite(detection.lossDb[k]));
  const pairs = keys.slice(1).map((k, i) => [keys[i] ?? 0, k] as const);
  for (const [low, high] of isEdge ? [] : pairs) {
    const at = (values: ArrayLike<number>, k: number): number => values[k] ?? Number.NaN;
    const growthDb = at(detection.lossDb, high) - at(detection.lossDb, low);
    const stepDb = at(drivesDb, high) - at(drivesDb, low);
    const spreadDb = Math.max(
      LEAST_DB,
      SIGMAS *
        Math.hypot(
          at(gains.sigmaDb, low),
          at(gains.sigmaDb, high),
          at(gains.stepSigmaDb, low),
          at(gains.stepSigmaDb, high),
        ),
    );
    const runs = `from the ${sayRun(at(drivesDb, low))} to the ${sayRun(at(drivesDb, high))} run`;
    if (growthDb < -spreadDb) {
      return {
        control: "slow control",
        reason: `the loss shrinks by ${sayDb(-growthDb)} ${runs}, which no static control does: the gain depends on time`,
      };
    }
    if (growthDb > stepDb + spreadDb) {
      return {
        control: "slow control",
        reason: `the output falls by ${sayDb(growthDb - stepDb)} ${runs}, which no static control does: the gain depends on time`,
      };
    }
  }
  return {
    control: "several controls",
    reason:
      "the losses grow from run to run as no single law does: two gain controls or two paths add up in this band, or a slow control acts; repeat with a sweep twice as long, what stays is static",
  };
}
