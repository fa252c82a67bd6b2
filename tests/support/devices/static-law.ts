/** The static law of a device: steady tones at rising levels through the same program, and a plain DFT. */
import { toPeak, type Device } from "./device";

const RATE_HZ = 192_000;
const STEP_DB = 0.5;
/** Under every knee of the devices. */
const FROM_DB = 72;
const TO_DB = 102;
/** Ten periods and more, behind a settling as long: of the bass longer than of the rest. */
const toToneS = (frequencyHz: number): number => (frequencyHz < 200 ? 0.2 : 0.1);
const LEAD_IN_TONES = 4;

export interface StaticLaw {
  /** [steps] */
  driveDb: number[];
  /** [steps] decibels lost. */
  lossDb: number[];
}

export async function measureStaticLaw(device: Device, frequencyHz: number): Promise<StaticLaw> {
  const driveDb = Array.from(
    { length: (TO_DB - FROM_DB) / STEP_DB + 1 },
    (_, i) => FROM_DB + i * STEP_DB,
  );
  const toneS = toToneS(frequencyHz);
  const length = Math.round(toneS * RATE_HZ);
  // A whole number of periods ends each tone; the look-ahead of a limiter is shorter than what is left out.
  const periods = Math.max(1, Math.floor((toneS / 2) * frequencyHz));
  const window = Math.round((periods * RATE_HZ) / frequencyHz);
  const omega = (2 * Math.PI * periods) / window;
  // The first tone is played several times: programs begin with their gain turned down.
  const played = [...Array.from({ length: LEAD_IN_TONES }, () => FROM_DB), ...driveDb];
  const tones = new Float64Array(length * played.length);
  played.forEach((db, i) => {
    const peak = toPeak(db);
    for (let n = i * length; n < (i + 1) * length; n += 1) tones[n] = peak * Math.sin(omega * n);
  });
  const heard = await device.effect(tones, RATE_HZ);
  const margin = Math.round(0.01 * RATE_HZ);
  const lossDb = driveDb.map((db, i) => {
    let [re, im] = [0, 0];
    const end = (LEAD_IN_TONES + i + 1) * length - margin;
    for (let n = end - window; n < end; n += 1) {
      re += (heard[n] ?? 0) * Math.cos(omega * n);
      im += (heard[n] ?? 0) * Math.sin(omega * n);
    }
    return 20 * Math.log10(toPeak(db) / ((2 * Math.hypot(re, im)) / window));
  });
  const quietest = lossDb[0] ?? 0;
  return { driveDb, lossDb: lossDb.map((loss) => loss - quietest) };
}

/** Drive at which the loss is reached; Infinity above the highest tone. */
export function findOnsetDb({ driveDb, lossDb }: StaticLaw, lossWantedDb: number): number {
  const i = lossDb.findIndex((loss) => loss >= lossWantedDb);
  if (i === -1) return Infinity;
  const [u0 = NaN, u1 = NaN, c0 = 0, c1 = 0] = [
    driveDb[i - 1],
    driveDb[i],
    lossDb[i - 1],
    lossDb[i],
  ];
  // Between two tones a knee may lie: the loss runs on as it does above, if it began later than in a straight line.
  const slope = ((lossDb[i + 1] ?? c1) - c1) / STEP_DB;
  const straight = u0 + ((lossWantedDb - c0) / (c1 - c0)) * (u1 - u0);
  return slope > 0 ? Math.max(straight, u1 - (c1 - lossWantedDb) / slope) : straight;
}
