/**
 * How well an absolute level is known (docs/domain.md section 10): its parts as standard uncertainties,
 * combined as root of squares and expanded with k = 2, for the one unit that was measured.
 */
import type { z } from "zod";
import type { SplUncertaintyPart, splUncertaintySchema } from "../result/result-schema";
import type { StatedUncertainty } from "../series/series-schema";
import type { Environment } from "../series/vocabulary";
import { gainsOf, type LevelGroup } from "./compression";
import { sayDb, sayNumber } from "./say";
import type { MeasuredSeries } from "./types";
import { COVERAGE_FACTOR, repeatSigmaDb } from "./uncertainty";

/** What is the same for all bands of a series. */
export interface SplScaleFacts {
  environment: Environment;
  distanceM: number;
  gateMs?: number | undefined;
  /** How the scale came about; null where tables state their levels: then nothing is known of it. */
  calibratedBy: "calibrator" | "sensitivity" | null;
  /** After minus before, dB; absent where there was one recording. */
  calibratorChangeDb?: number | undefined;
  hasMicrophoneFile: boolean;
  stated: StatedUncertainty;
}

/** What differs from band to band. */
export interface SplBandFacts {
  exactHz: number;
  /** Standard uncertainty of one run's level from noise and rounding, dB. */
  noiseDb: number;
  /** Standard deviation of one run as repeats show it, dB, over the root of the takes; null where nothing was repeated. */
  repeatDb: number | null;
}

/** Limits of error are taken as even between their ends: the standard uncertainty is the half width over this. */
const EVEN = Math.sqrt(3);
/** IEC 60942:2017 class 1, 160 to 1250 Hz. */
const CALIBRATOR_LIMIT_DB = 0.25;
/** A sensitivity that somebody states, common practice. */
const SENSITIVITY_LIMIT_DB = 0.5;
/** One calibrator recording says nothing of what the gain did later, common practice. */
const UNSEEN_DRIFT_LIMIT_DB = 0.1;
const DISTANCE_LIMIT_M = 0.01;
/** Common practice, no source. */
const UNSEEN_REPEAT_DB = 0.1;
const TEMPERATURE_LIMIT_DB_PER_K = 0.01;
const CALIBRATION_TEMPERATURE_C = 23;
const UNSEEN_TEMPERATURE_K = 10;
/** What walls, stands and ground leave, common practice, no source. */
const REFLECTION_LIMIT_DB: Record<Environment, number> = {
  anechoic: 0.2,
  "ground-plane": 0.5,
  "flush-half-space": 0.5,
  outdoors: 0.5,
  gated: 0.3,
  "in-room": Number.NaN,
  "near-field": Number.NaN,
};
/** A gate resolves coarsely up to this over its length (docs/domain.md section 1). */
const COARSE_GATE = 4300;
const COARSE_GATE_LIMIT_DB = 1;
/** A microphone file re its own frequency of calibration, common practice: expanded, up to a frequency. */
const FILE_EXPANDED_DB: readonly (readonly [upToHz: number, expandedDb: number])[] = [
  [4500, 0.3],
  [9000, 0.6],
  [Infinity, 1],
];
/** IEC 61672-1:2013 class 1: the wider of the two limits, up to the upper edge of a third octave. */
const CLASS_1_LIMIT_DB: readonly (readonly [upToHz: number, limitDb: number])[] = [
  [28.18, 2],
  [35.48, 1.5],
  [891.3, 1],
  [1122, 0.7],
  [4467, 1],
  [5623, 1.5],
  [7079, 2],
  [8913, 2.5],
  [11_220, 3],
  [14_125, 5],
  [Infinity, 16],
];

const upTo = (table: readonly (readonly [number, number])[], hz: number): number =>
  table.find(([top]) => hz <= top)?.[1] ?? Number.NaN;

/** Combines the parts as root of squares, expanded with k = 2, dB. */
export const expandDb = (parts: readonly Pick<SplUncertaintyPart, "standard_dB">[]): number =>
  COVERAGE_FACTOR * Math.hypot(...parts.map((part) => part.standard_dB));

/**
 * The parts of one band's budget, largest common ones first as they are named in the domain text.
 *
 * @returns null where the scale is not known: levels that tables state.
 */
export function listSplParts(
  scale: SplScaleFacts,
  band: SplBandFacts,
): SplUncertaintyPart[] | null {
  if (scale.calibratedBy === null) return null;
  return [
    toCalibrator(scale, scale.calibratedBy),
    toMicrophone(scale, band.exactHz),
    toDistance(scale),
    toReflections(scale, band.exactHz),
    toTemperature(scale.stated),
    toRepeat(band.repeatDb),
    toDrift(scale),
    {
      name: "noise",
      standard_dB: band.noiseDb,
      common: false,
      basis: "noise and rounding of the least certain run",
    },
  ];
}

function toCalibrator(
  { stated }: SplScaleFacts,
  by: "calibrator" | "sensitivity",
): SplUncertaintyPart {
  const name = by === "calibrator" ? "calibrator" : "sensitivity";
  if (stated.calibrator_dB !== undefined)
    return common(
      name,
      stated.calibrator_dB / COVERAGE_FACTOR,
      `stated ± ${sayDb(stated.calibrator_dB, 2)}, k = 2`,
    );
  const limitDb = by === "calibrator" ? CALIBRATOR_LIMIT_DB : SENSITIVITY_LIMIT_DB;
  const basis = by === "calibrator" ? "assumed class 1 of IEC 60942" : "assumed";
  return common(name, limitDb / EVEN, `${basis}, ± ${sayDb(limitDb, 2)}`);
}

function toMicrophone(
  { stated, hasMicrophoneFile }: SplScaleFacts,
  hz: number,
): SplUncertaintyPart {
  const part = (standardDb: number, basis: string): SplUncertaintyPart => ({
    name: "microphone",
    standard_dB: standardDb,
    common: false,
    basis,
  });
  if (stated.microphone_dB !== undefined)
    return part(
      stated.microphone_dB / COVERAGE_FACTOR,
      `stated ± ${sayDb(stated.microphone_dB, 2)}, k = 2`,
    );
  if (hasMicrophoneFile) {
    const expandedDb = upTo(FILE_EXPANDED_DB, hz);
    return part(
      expandedDb / COVERAGE_FACTOR,
      `its file, assumed ± ${sayDb(expandedDb, 1)} here, k = 2`,
    );
  }
  const limitDb = upTo(CLASS_1_LIMIT_DB, hz);
  return part(
    limitDb / EVEN,
    `no file; assumed class 1 of IEC 61672-1, ± ${sayDb(limitDb, 1)} here`,
  );
}

function toDistance({ distanceM, stated }: SplScaleFacts): SplUncertaintyPart {
  const limitM = stated.distance_m ?? DISTANCE_LIMIT_M;
  const limitDb = 20 * Math.log10(1 + limitM / distanceM);
  const basis = stated.distance_m === undefined ? "assumed" : "stated";
  return common(
    "distance",
    limitDb / EVEN,
    `${basis} ± ${sayNumber(100 * limitM, 1)} cm at ${sayNumber(distanceM, 2)} m`,
  );
}

function toReflections(scale: SplScaleFacts, hz: number): SplUncertaintyPart {
  const { environment, gateMs, stated } = scale;
  if (stated.reflections_dB !== undefined)
    return common(
      "reflections",
      stated.reflections_dB / COVERAGE_FACTOR,
      `stated ± ${sayDb(stated.reflections_dB, 2)}, k = 2`,
    );
  const coarse = environment === "gated" && gateMs !== undefined && hz < COARSE_GATE / gateMs;
  const limitDb = coarse ? COARSE_GATE_LIMIT_DB : REFLECTION_LIMIT_DB[environment];
  return {
    name: "reflections",
    standard_dB: limitDb / EVEN,
    common: false,
    basis: `assumed ± ${sayDb(limitDb, 1)}${coarse ? ": the gate resolves coarsely here" : ` ${environment}`}`,
  };
}

function toTemperature({ temperature_C: temperatureC }: StatedUncertainty): SplUncertaintyPart {
  const awayK =
    temperatureC === undefined
      ? UNSEEN_TEMPERATURE_K
      : Math.abs(temperatureC - CALIBRATION_TEMPERATURE_C);
  const basis =
    temperatureC === undefined
      ? `not stated; assumed within ${UNSEEN_TEMPERATURE_K} K of ${CALIBRATION_TEMPERATURE_C} °C`
      : `${sayNumber(awayK, 1)} K from ${CALIBRATION_TEMPERATURE_C} °C`;
  return common("temperature", (TEMPERATURE_LIMIT_DB_PER_K * awayK) / EVEN, basis);
}

const toRepeat = (repeatDb: number | null): SplUncertaintyPart => ({
  name: "repeat",
  standard_dB: repeatDb ?? UNSEEN_REPEAT_DB,
  common: false,
  basis: repeatDb === null ? "nothing was repeated; assumed" : "scatter of the repeats",
});

function toDrift({ calibratedBy, calibratorChangeDb }: SplScaleFacts): SplUncertaintyPart {
  return calibratedBy === "calibrator" && calibratorChangeDb !== undefined
    ? common("drift", Math.abs(calibratorChangeDb) / 2, "half of what the calibrator changed by")
    : common(
        "drift",
        UNSEEN_DRIFT_LIMIT_DB / EVEN,
        `not seen, without a calibrator recording after; assumed ± ${sayDb(UNSEEN_DRIFT_LIMIT_DB, 1)}`,
      );
}

const common = (
  name: SplUncertaintyPart["name"],
  standardDb: number,
  basis: string,
): SplUncertaintyPart => ({
  name,
  standard_dB: standardDb,
  common: true,
  basis,
});

/**
 * The budget of every band, for its least certain plain short-term run.
 *
 * @param groups plain short-term levels.
 * @returns [bands] null where no absolute level is given, or its scale is not known.
 */
export function budgetSpl(
  { splScale, bands, splValid }: MeasuredSeries,
  groups: readonly LevelGroup[],
): (z.infer<typeof splUncertaintySchema> | null)[] {
  const repeatDb = repeatSigmaDb(
    groups.map(({ runs }) => ({ gainDb: runs.map(gainsOf) })),
    bands.length,
  );
  const takes = Math.min(...groups.map(({ runs }) => runs.length));
  return bands.map(({ exactHz }, b) => {
    const noiseDb = groups
      .flatMap(({ runs }) => runs.flatMap((run) => run.bands[b] ?? []))
      .filter(({ splDb }) => Number.isFinite(splDb))
      // A band without any noise has no scatter to tell of.
      .map(({ sigmaDb }) => (Number.isFinite(sigmaDb) ? sigmaDb : 0));
    if (splScale === undefined || !splValid || noiseDb.length === 0) return null;
    const single = repeatDb?.[b];
    const parts = listSplParts(splScale, {
      exactHz,
      noiseDb: Math.max(...noiseDb),
      repeatDb: single === undefined ? null : single / Math.sqrt(takes),
    });
    return parts === null ? null : { expanded_dB: expandDb(parts), parts };
  });
}
