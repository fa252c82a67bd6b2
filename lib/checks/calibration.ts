/** From a calibrator's recording to sound pressure, docs/check-values.md section 12. */
import { measureTone, toFullScaleDb } from "../analysis/calibration";
import { Plans } from "../analysis/cell-power";
import { toExposurePa2h, toLevelDb } from "../exposure/rules";
import { toChecks } from "./check";

const RATE_HZ = 48_000;

/** Level of a signal at signalDbfs where a calibrator of levelDb was recorded at calibratorDbfs. */
function toSplDb(levelDb: number, calibratorDbfs: number, signalDbfs: number, frequencyHz = 1000) {
  const amplitude = 10 ** (calibratorDbfs / 20);
  const samples = Float64Array.from(
    { length: 2 * RATE_HZ },
    (_, n) => amplitude * Math.sin((2 * Math.PI * frequencyHz * n) / RATE_HZ + 0.3),
  );
  const recording = { file: "calibrator.wav", rateHz: RATE_HZ, samples, fullScale: 1 };
  return toFullScaleDb(measureTone(recording, 1000, new Plans()), levelDb) + signalDbfs;
}

const toPressurePa = (levelDb: number): number =>
  Math.sqrt(toExposurePa2h({ levelDbA: levelDb, durationS: 3600 }));

export const CALIBRATION_CHECKS = toChecks("calibration", {
  "94-at-minus-30": {
    what: "calibrator of 94 dB read at −30 dBFS, signal at −12.5 dBFS",
    compute: () => toSplDb(94, -30, -12.5),
    expected: 111.5,
    tolerance: 0.001,
    unit: "dB",
    source: "L + (L_cal − L_cal,dBFS), same convention on both [C]",
    worked: [44],
  },
  "114-off-frequency": {
    what: "calibrator of 114 dB at 1003.7 Hz read at −10 dBFS, signal at −40 dBFS",
    compute: () => toSplDb(114, -10, -40, 1003.7),
    expected: 84,
    tolerance: 0.001,
    unit: "dB",
    source: "L + (L_cal − L_cal,dBFS), same convention on both [C]",
  },
  "1-pa": {
    what: "sound pressure of 1 Pa",
    compute: () => toLevelDb(1),
    expected: 93.979,
    tolerance: 0.001,
    unit: "dB",
    source: "definition, re 20 µPa [C]",
    worked: [45],
  },
  "114-db": {
    what: "sound pressure at 114 dB",
    compute: () => toPressurePa(114),
    expected: 10.0237,
    tolerance: 0.0001,
    unit: "Pa",
    source: "definition, re 20 µPa [C]",
    worked: [45],
  },
  "94-db": {
    what: "sound pressure at 94 dB",
    compute: () => toPressurePa(94),
    expected: 1.00237,
    tolerance: 0.00001,
    unit: "Pa",
    source: "definition, re 20 µPa [C]",
  },
});
