/** Each constant of the code is held: moved until the value is off by two tolerances, its check fails. */
import { beforeAll, describe, expect, it } from "vitest";
import { agrees } from "../../lib/checks/check";
import { CHECKS } from "../../lib/checks/checks";
import bands from "../../lib/checks/published/bands.json";
import {
  buildMovableChecks,
  toLiteral,
  type CheckValues,
  type Constant,
} from "../support/movable-constants";

interface Held extends Constant {
  /** The check that holds it. */
  by: string;
}

const held = (file: string, name: string, text: string, by: string): Held => ({
  name,
  file,
  text,
  by,
});

const WEIGHTING = "lib/analysis/weighting.ts";
const BANDS = "lib/analysis/bands.ts";
const RULES = "lib/exposure/rules.ts";
const AIR = "lib/analysis/air-absorption.ts";
const COIL = "lib/analysis/voice-coil.ts";
const LAWS = "lib/analysis/onset/static-laws.ts";
const PROGRAMME = "lib/analysis/programme.ts";
const SCALE = "lib/analysis/scale.ts";
const SPL = "lib/analysis/spl-uncertainty.ts";

const CONSTANTS: Held[] = [
  held(SPL, "calibrator class 1", "CALIBRATOR_LIMIT_DB = «0.25»", "uncertainty.class-1-calibrator"),
  held(SPL, "even limits", "const EVEN = Math.sqrt(«3»)", "uncertainty.class-1-calibrator"),
  held(SPL, "microphone at 1 kHz", "[1122, «0.7»]", "uncertainty.microphone-1k"),
  held(SPL, "microphone at 8 kHz", "[8913, «2.5»]", "uncertainty.microphone-8k"),
  held(SPL, "distance", "DISTANCE_LIMIT_M = «0.01»", "uncertainty.distance"),
  held(SPL, "per kelvin", "TEMPERATURE_LIMIT_DB_PER_K = «0.01»", "uncertainty.temperature"),
  held(SPL, "coarse gate", "COARSE_GATE_LIMIT_DB = «1»", "uncertainty.gate-coarse"),
  held(SPL, "unseen repeat", "UNSEEN_REPEAT_DB = «0.1»", "uncertainty.budget-assumed"),
  held(
    "lib/analysis/uncertainty.ts",
    "coverage factor",
    "COVERAGE_FACTOR = «2»",
    "uncertainty.three-four-five",
  ),
  held(WEIGHTING, "pole 1", "const F1 = «20.598997057618316»;", "weighting.formula-c--17"),
  held(WEIGHTING, "pole 2", "const F2 = «107.65264864304629»;", "weighting.formula-a--10"),
  held(WEIGHTING, "pole 3", "const F3 = «737.8622307362901»;", "weighting.formula-a--3"),
  held(WEIGHTING, "pole 4", "const F4 = «12194.217147998012»;", "weighting.formula-c-10"),
  held(WEIGHTING, "1 kHz of A", "const A_AT_1000 = rawA(«1e6»);", "weighting.a-1000"),
  held(WEIGHTING, "1 kHz of C", "const C_AT_1000 = rawC(«1e6»);", "weighting.formula-c-10"),
  held(BANDS, "cells per decade", "const CELLS_PER_DECADE = «80»;", "bands.lower-edge-1000"),
  held(BANDS, "cells per band", "export const CELLS_PER_BAND = «8»;", "bands.upper-edge-20k"),
  held(BANDS, "mid-band ratio", "exactHz: 1000 * 10 ** (n / «10»),", "bands.centre-1250"),
  held(BANDS, "mid-band reference", "exactHz: «1000» * 10 ** (n / 10),", "bands.centre-20"),
  held(BANDS, "edge reference", "=> «1000» * 10 ** (m / CELLS_PER_DECADE);", "bands.lower-edge-20"),
  held(RULES, "pressure reference", "const REFERENCE_PA = «20e-6»;", "calibration.1-pa"),
  held(RULES, "venue limit", "export const VENUE_LIMIT_DB_A = «100»;", "exposure.venue-limit"),
  held(RULES, "lower peak", "lowerAction: «135»", "exposure.eu-lower-peak"),
  held(RULES, "upper peak", "upperAction: «137»", "exposure.eu-upper-peak"),
  held(RULES, "limit peak", "limit: «140»", "exposure.eu-limit-peak"),
  held(RULES, "equal energy", "EQUAL_ENERGY_DB = «10» * Math.log10(2)", "exposure.h870-95"),
  held(RULES, "NIOSH level", 'name: "NIOSH",\n    criterionDbA: «85»', "exposure.niosh-85"),
  held(
    RULES,
    "NIOSH hours",
    "criterionDbA: 85,\n    periodS: «8» * HOUR_S,\n    exchangeDb: 3",
    "exposure.niosh-94",
  ),
  held(RULES, "NIOSH exchange", "exchangeDb: «3»,", "exposure.niosh-100"),
  held(
    RULES,
    "EU level",
    'name: "EU upper action value",\n    criterionDbA: «85»',
    "exposure.eu-88",
  ),
  held(
    RULES,
    "EU hours",
    "periodS: «8» * HOUR_S,\n    exchangeDb: EQUAL_ENERGY_DB",
    "exposure.eu-quarter-hour",
  ),
  held(RULES, "H.870 level", 'name: "H.870",\n    criterionDbA: «80»', "exposure.h870-80"),
  held(RULES, "H.870 hours", "criterionDbA: 80,\n    periodS: «40»", "exposure.h870-95"),
  held(RULES, "H.870 sensitive level", "criterionDbA: «75»", "exposure.h870-sensitive"),
  held(
    RULES,
    "H.870 sensitive hours",
    "criterionDbA: 75,\n    periodS: «40»",
    "exposure.h870-sensitive",
  ),
  held(AIR, "neper", "const DB_PER_NEPER = «8.686»;", "distance.air-10k"),
  held(AIR, "classical", "«1.84e-11»", "distance.air-20k"),
  held(AIR, "oxygen strength", "«0.01275»", "distance.air-10k"),
  held(AIR, "oxygen temperature", "«2239.1»", "distance.air-20k"),
  held(AIR, "nitrogen strength", "«0.1068»", "distance.air-1k"),
  held(AIR, "nitrogen temperature", "«3352»", "distance.air-1k"),
  held(AIR, "oxygen relaxation", "«4.04e4»", "distance.air-8k-dry"),
  held(AIR, "nitrogen relaxation", "«280»", "distance.air-1k-70"),
  held(AIR, "saturation", "«6.8346»", "distance.air-8k-dry"),
  held(AIR, "saturation offset", "«4.6151»", "distance.air-8k-dry"),
  held(COIL, "copper", "export const COPPER_PER_K = «0.00393»;", "coil-heating.loss-100"),
  held(LAWS, "cubic", "x - («4» / 27) * x ** 3),", "harmonics.cubic-h3"),
  held(
    LAWS,
    "knee",
    ") / («2» * kneeDb);\n}\n\n/** Drive over theta",
    "static-curves.compressor-10",
  ),
  held(SCALE, "ground plane", "const GROUND_PLANE_DB = «-6.02»;", "distance.ground-plane"),
  ...bands.third_octave.map(({ n, nominal_hz, iec60268_1_programme_rel_db: db }) =>
    held(
      PROGRAMME,
      `programme at ${nominal_hz} Hz`,
      `[${nominal_hz}, «${db}»],`,
      `programme.iec-${n}`,
    ),
  ),
];

/** Values that jump: moved by themselves, not by a slope. */
const STEPS = new Set(["venue limit"]);

let valuesOf: CheckValues;
beforeAll(async () => {
  valuesOf = await buildMovableChecks(CONSTANTS);
});

describe("a constant moved by two tolerances of its check", () => {
  it.each(CONSTANTS)("$name ($file) is held by $by", async (constant) => {
    const check = CHECKS.find(({ id }) => id === constant.by);
    if (check === undefined) throw new Error(`no check ${constant.by}`);
    const { expected, tolerance } = check;
    const literal = toLiteral(constant);
    const at = async (move: number): Promise<number> => {
      const moved = { [constant.name]: literal + move };
      return (await valuesOf([constant.by], moved))[0] ?? Number.NaN;
    };
    const start = await at(0);
    expect(agrees(start, expected, tolerance)).toBe(true);
    const probe = 1e-6 * Math.max(1e-3, Math.abs(literal));
    const slope = STEPS.has(constant.name) ? tolerance / 0.05 : ((await at(probe)) - start) / probe;
    for (const by of [-2 * tolerance, 2 * tolerance]) {
      const value = await moveTo(at, start, by, by / slope);
      expect(agrees(value, expected, tolerance), `${start} moved to ${value}`).toBe(false);
    }
  });
});

/** The value where it has gone by `by`, to a hundredth where it is smooth. */
async function moveTo(
  at: (move: number) => Promise<number>,
  start: number,
  by: number,
  first: number,
): Promise<number> {
  let move = first;
  let value = await at(move);
  for (let round = 0; round < 4 && Math.abs((value - start) / by - 1) > 0.01; round += 1) {
    move *= by / (value - start);
    value = await at(move);
  }
  return value;
}
