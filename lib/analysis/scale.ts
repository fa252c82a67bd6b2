/** The scale of a series: full scale in SPL at 1 m, and whether the place allows an SPL at all. */
import { AnalysisError } from "../errors/app-error";
import type { Warning } from "../result/result-schema";
import type { Series } from "../series/series-schema";
import { isTableName } from "../series/table-columns";
import type { Environment } from "../series/vocabulary";
import { toAirLossDbPerM } from "./air-absorption";
import { measureTone, toFullScaleDb } from "./calibration";
import type { Plans } from "./cell-power";
import type { Recording } from "./types";

/** Pressure doubles on the ground: ground-plane results are referred to the free field. */
const GROUND_PLANE_DB = -6.02;
/** From three times the largest dimension on the level falls as from a point. */
const FAR_FIELD_DIMENSIONS = 3;
const SUSPECT_CHANGE_DB = 0.5;
/** Usual weather, for a caution only: what the day's was is not known. */
const USUAL_AIR = { temperatureC: 20, relativeHumidityPercent: 50 };
const TOLD_AIR_LOSS_DB = 0.3;
const AIR_LOSS_AT_HZ = 10_000;

const SPL_VALID: Record<Environment, boolean> = {
  anechoic: true,
  "ground-plane": true,
  "flush-half-space": true,
  outdoors: true,
  gated: true,
  "in-room": false,
  "near-field": false,
};

export interface Scale {
  /** SPL at 1 m of a recorded sine that just reaches full scale, dB. */
  fullScaleDb: number;
  splValid: boolean;
  calibratorChangeDb: number | undefined;
  warnings: Warning[];
}

/** Whether a level at 1 m can be told in this place. */
export const isSplValid = (environment: Environment): boolean => SPL_VALID[environment];

/** What refers a level at the microphone to 1 m in the free field, dB. */
export function toPlaceDb(environment: Environment, distanceM: number): number {
  const distanceDb = environment === "near-field" ? 0 : 20 * Math.log10(distanceM);
  return distanceDb + (environment === "ground-plane" ? GROUND_PLANE_DB : 0);
}

/**
 * @param read recordings of the calibrator by file name.
 * @throws AnalysisError "calibration.missing", "calibration.not-a-tone", "run.too-short"
 */
export async function measureScale(
  series: Series,
  read: (file: string) => Promise<Recording>,
  plans: Plans,
): Promise<Scale> {
  const { calibration, environment, distance_m: distanceM } = series;
  const tablesOnly = series.runs.every((run) => isTableName(run.file));
  if (calibration === undefined && !tablesOnly) {
    throw new AnalysisError(
      "calibration.missing",
      "The series has no calibration: give a calibrator recording with its level, or full_scale_dB.",
    );
  }
  const warnings: Warning[] = [];
  const splValid = isSplValid(environment);
  const placeDb = toPlaceDb(environment, distanceM);
  warnOfPlace(series, splValid, warnings);
  // Tables state their levels themselves.
  if (calibration === undefined)
    return { fullScaleDb: 0, splValid, calibratorChangeDb: undefined, warnings };
  if ("full_scale_dB" in calibration) {
    return {
      fullScaleDb: calibration.full_scale_dB + placeDb,
      splValid,
      calibratorChangeDb: undefined,
      warnings,
    };
  }
  const measure = async (file: string): Promise<number> => {
    const recording = await read(file);
    const tone = measureTone(recording, calibration.frequency_Hz, plans);
    if (tone.amplitude >= recording.fullScale * 0.9999) {
      warnings.push({
        code: "calibration.clipped",
        message: `${file} reaches digital full scale: the calibrator may be clipped and every level too high.`,
        file,
      });
    }
    return toFullScaleDb(tone, calibration.level_dB);
  };
  const before = await measure(calibration.file);
  if (calibration.after_file === undefined)
    return { fullScaleDb: before + placeDb, splValid, calibratorChangeDb: undefined, warnings };
  const after = await measure(calibration.after_file);
  // A louder recording of the same calibrator means more gain, so a lower full scale.
  const change = before - after;
  if (Math.abs(change) > SUSPECT_CHANGE_DB) {
    warnings.push({
      code: "calibration.drift",
      message: `The calibrator reads ${Math.abs(change).toFixed(2)} dB ${change > 0 ? "higher" : "lower"} after the runs than before: the gain or the microphone changed, levels are suspect.`,
      file: calibration.after_file,
    });
  }
  return {
    fullScaleDb: (before + after) / 2 + placeDb,
    splValid,
    calibratorChangeDb: change,
    warnings,
  };
}

function warnOfPlace(
  { environment, distance_m: distanceM, largest_dimension_m: dimensionM, gate_ms: gateMs }: Series,
  splValid: boolean,
  warnings: Warning[],
): void {
  if (!splValid) {
    warnings.push({
      code: "spl.not-assessed",
      message: `SPL is not assessed ${environment === "near-field" ? "in the near field" : "in a room"}; compression and onset hold there as long as nothing moves. Distortion is weighted by the ${environment === "near-field" ? "place" : "room"}.`,
    });
  }
  if (dimensionM !== undefined && distanceM < FAR_FIELD_DIMENSIONS * dimensionM && splValid) {
    warnings.push({
      code: "distance.near",
      message: `${distanceM} m is nearer than three times the largest dimension (${(FAR_FIELD_DIMENSIONS * dimensionM).toFixed(2)} m): levels referred to 1 m are uncertain.`,
    });
  }
  const airDb = toAirLossDbPerM(AIR_LOSS_AT_HZ, USUAL_AIR) * (distanceM - 1);
  if (splValid && airDb > TOLD_AIR_LOSS_DB) {
    warnings.push({
      code: "distance.air",
      message: `Over ${distanceM} m the air takes about ${airDb.toFixed(1)} dB at 10 kHz (20 °C, 50 % humidity) and more above: levels referred to 1 m are that much too low there. Compression and distortion re the fundamental are not changed up to a few kilohertz.`,
    });
  }
  if (environment === "gated" && gateMs !== undefined) {
    warnings.push({
      code: "spl.gate",
      message: `The gate of ${gateMs} ms gives no SPL below ${(1000 / gateMs).toFixed(0)} Hz and only a coarse one up to ${(4300 / gateMs).toFixed(0)} Hz. Compression is ungated and holds everywhere; distortion is weighted by the room.`,
    });
  }
}
