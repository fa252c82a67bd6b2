/** Every check, by subject: the tests, `npm run checks` and the page "How we measure" read these rows. */
import { BAND_CHECKS } from "./bands";
import { CALIBRATION_CHECKS } from "./calibration";
import type { Check } from "./check";
import { COIL_CHECKS } from "./coil-heating";
import { DISTANCE_CHECKS } from "./distance";
import { EXPOSURE_CHECKS } from "./exposure";
import { FILE_LAYOUT_CHECKS } from "./file-layouts";
import { HARMONICS_CHECKS } from "./harmonics";
import { PROGRAMME_CHECKS } from "./programme";
import { STATIC_CURVE_CHECKS } from "./static-curves";
import { SWEEP_CHECKS } from "./sweep";
import { UNCERTAINTY_CHECKS } from "./uncertainty";
import { WEIGHTING_CHECKS } from "./weighting";

export const CHECKS: readonly Check[] = [
  ...WEIGHTING_CHECKS,
  ...BAND_CHECKS,
  ...CALIBRATION_CHECKS,
  ...DISTANCE_CHECKS,
  ...UNCERTAINTY_CHECKS,
  ...HARMONICS_CHECKS,
  ...SWEEP_CHECKS,
  ...STATIC_CURVE_CHECKS,
  ...COIL_CHECKS,
  ...PROGRAMME_CHECKS,
  ...EXPOSURE_CHECKS,
  ...FILE_LAYOUT_CHECKS,
];
