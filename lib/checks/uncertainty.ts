/** The budget of an absolute level, docs/domain.md section 10: its parts by hand, and how they combine. */
import { expandDb, listSplParts, type SplScaleFacts } from "../analysis/spl-uncertainty";
import type { SplUncertaintyPart } from "../result/result-schema";
import { toChecks, type CheckRow } from "./check";

const EXPANSION = "k = 2 times the root of the sum of squares, docs/domain.md section 10 [C]";

/** Nothing stated: a class 1 calibrator before, no microphone file, 1 m in an anechoic room. */
const BARE: SplScaleFacts = {
  environment: "anechoic",
  distanceM: 1,
  calibratedBy: "calibrator",
  hasMicrophoneFile: false,
  stated: {},
};
/** Everything stated or measured. */
const STATED: SplScaleFacts = {
  ...BARE,
  distanceM: 2,
  calibratorChangeDb: -0.12,
  stated: {
    calibrator_dB: 0.2,
    microphone_dB: 0.4,
    distance_m: 0.005,
    reflections_dB: 0.3,
    temperature_C: 20,
  },
};

const toParts = (scale: SplScaleFacts, exactHz: number, noiseDb: number, repeatDb: number | null) =>
  listSplParts(scale, { exactHz, noiseDb, repeatDb }) ?? [];

const part =
  (name: SplUncertaintyPart["name"], scale: SplScaleFacts, exactHz = 1000) =>
  (): number =>
    toParts(scale, exactHz, 0.01, null).find((one) => one.name === name)?.standard_dB ?? Number.NaN;

const row = (
  what: string,
  compute: () => number,
  expected: number,
  source: string,
  tolerance = 0.0005,
): CheckRow => ({ what, compute, expected, tolerance, unit: "dB", source });

const MICROPHONE = "half width over √3, IEC 61672-1:2013 class 1 [R1]";

export const UNCERTAINTY_CHECKS = toChecks("uncertainty", {
  "three-four-five": row(
    "two parts of 0.3 and 0.4 dB, expanded",
    () => expandDb([{ standard_dB: 0.3 }, { standard_dB: 0.4 }]),
    1,
    EXPANSION,
  ),
  "class-1-calibrator": row(
    "standard uncertainty of a class 1 calibrator, ± 0.25 dB evenly",
    part("calibrator", BARE),
    0.1443,
    "0.25 dB over √3, IEC 60942:2017 [R2]",
  ),
  "microphone-63": row(
    "class 1 microphone without its file at 63 Hz, ± 1.0 dB evenly",
    part("microphone", BARE, 63.0957),
    0.5774,
    MICROPHONE,
  ),
  "microphone-1k": row(
    "class 1 microphone without its file at 1 kHz, ± 0.7 dB evenly",
    part("microphone", BARE),
    0.4041,
    MICROPHONE,
  ),
  "microphone-8k": row(
    "class 1 microphone without its file at 8 kHz, + 1.5 and − 2.5 dB, the wider evenly",
    part("microphone", BARE, 7943.28),
    1.4434,
    MICROPHONE,
  ),
  distance: row(
    "1 cm at 1 m, evenly",
    part("distance", BARE),
    0.0499,
    "20 lg 1.01 = 0.0864 dB, over √3 [C]",
  ),
  drift: row(
    "calibrator 0.12 dB apart before and after",
    part("drift", STATED),
    0.06,
    "half the difference, docs/domain.md section 2 [C]",
  ),
  temperature: row(
    "3 K from 23 °C at 0.01 dB/K, evenly",
    part("temperature", STATED),
    0.0173,
    "0.03 dB over √3 [C]",
  ),
  "gate-coarse": row(
    "reflections at 500 Hz behind a gate of 5 ms, which resolves coarsely up to 860 Hz",
    part("reflections", { ...BARE, environment: "gated", gateMs: 5 }, 501.187),
    0.5774,
    "1 dB over √3 [C]",
  ),
  "budget-assumed": row(
    "1 kHz with nothing stated: 0.1443, 0.4041, 0.0499, 0.1155, 0.0577, 0.1, 0.0577 and 0.01 dB, expanded",
    () => expandDb(toParts(BARE, 1000, 0.01, null)),
    0.9311,
    EXPANSION,
  ),
  "budget-stated": row(
    "all stated: 0.1, 0.2, 0.0125, 0.15, 0.0173, 0.04, 0.06 and 0.03 dB, expanded",
    () => expandDb(toParts(STATED, 1000, 0.03, 0.04)),
    0.5623,
    EXPANSION,
  ),
});
