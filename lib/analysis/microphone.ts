/** The microphone's own response, taken out of every level and harmonic (docs/domain.md section 2). */
import { AnalysisError } from "../errors/app-error";

export interface MicrophoneTable {
  file: string;
  kind: "response" | "correction";
  /** [points] ascending, Hz. */
  frequencyHz: readonly number[];
  /** [points] dB. */
  levelDb: readonly number[];
}

export interface MicrophoneResponse {
  lowestHz: number;
  highestHz: number;
  /** Response at f re that at the calibrator's frequency, dB: subtract it. Held at its ends beyond the table. */
  toResponseDb: (frequencyHz: number) => number;
}

/**
 * @param calibratorHz where the response counts as 0 dB: the sensitivity is known there.
 * @throws AnalysisError "microphone.not-readable" where frequencies do not ascend or a value is no number.
 */
export function toMicrophoneResponse(
  { file, kind, frequencyHz, levelDb }: MicrophoneTable,
  calibratorHz: number,
): MicrophoneResponse {
  const sound = frequencyHz.length >= 2 && frequencyHz.length === levelDb.length;
  const wrong = frequencyHz.findIndex(
    (f, i) => !(f > (frequencyHz[i - 1] ?? 0)) || !Number.isFinite(levelDb[i]),
  );
  if (!sound || wrong >= 0) {
    throw new AnalysisError(
      "microphone.not-readable",
      sound
        ? `${file}: point ${wrong + 1} (${frequencyHz[wrong]} Hz, ${levelDb[wrong]} dB) does not follow the one before.`
        : `${file} holds no table of two points or more.`,
      { file },
    );
  }
  const lnHz = frequencyHz.map((f) => Math.log(f));
  const sign = kind === "response" ? 1 : -1;
  const read = (frequency: number): number =>
    sign * interpolate(lnHz, levelDb, Math.log(frequency));
  const atCalibrator = read(calibratorHz);
  return {
    lowestHz: frequencyHz[0]!,
    highestHz: frequencyHz.at(-1)!,
    toResponseDb: (frequency) => read(frequency) - atCalibrator,
  };
}

/** Linear in dB over ln f. */
function interpolate(x: readonly number[], y: readonly number[], at: number): number {
  if (at <= x[0]!) return y[0]!;
  if (at >= x.at(-1)!) return y.at(-1)!;
  let low = 0;
  let high = x.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (x[middle]! <= at) low = middle;
    else high = middle;
  }
  const share = (at - x[low]!) / (x[high]! - x[low]!);
  return y[low]! * (1 - share) + y[high]! * share;
}
