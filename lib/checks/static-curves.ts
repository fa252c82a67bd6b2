/** Static curves of limiters, compressors and crossovers, docs/check-values.md section 10. */
import { gainRidingLossDb, twoPathLossDb } from "../analysis/onset/static-laws";
import { toChecks, type CheckRow } from "./check";

const GIANNOULIS = "Giannoulis, Massberg, Reiss, JAES 60(6), 2012 [M, R22]";
const THRESHOLD_DB = -10;
const KNEE_DB = 6;

/** Output for an input, knee 6 dB around −10 dB. */
const output = (inputDb: number, ratio: number): number =>
  inputDb - gainRidingLossDb(inputDb - THRESHOLD_DB, KNEE_DB, 1 / ratio);

const POINTS = [
  [4, -13, -13, 39],
  [4, -10, -10.5625, 39],
  [4, -7, -9.25, 39],
  [4, 0, -7.5, 39],
  [Infinity, -10, -10.75, 40],
  [Infinity, -7, -10, 40],
  [Infinity, 0, -10, 40],
] as const;

const say = (db: number): string => String(db).replace("-", "−");

const points: [string, CheckRow][] = POINTS.map(([ratio, inputDb, outputDb, worked]) => [
  `${ratio === Infinity ? "limiter" : "compressor"}-${-inputDb}`,
  {
    what: `${ratio === Infinity ? "limiter at" : `${ratio} to 1 above`} −10 dB, knee 6 dB: output at ${say(inputDb)} dB`,
    compute: () => output(inputDb, ratio),
    expected: outputDb,
    tolerance: 1e-9,
    unit: "dB",
    source: GIANNOULIS,
    worked: [worked],
  },
]);

const AT_THRESHOLD = [
  [2, 4, 0.25],
  [4, 6, 0.5625],
  [20, 12, 1.425],
] as const;

const knees: [string, CheckRow][] = AT_THRESHOLD.map(([ratio, knee, lossDb]) => [
  `knee-${ratio}-${knee}`,
  {
    what: `${ratio} to 1, knee ${knee} dB: loss at the threshold itself`,
    compute: () => gainRidingLossDb(0, knee, 1 / ratio),
    expected: lossDb,
    tolerance: 1e-9,
    unit: "dB",
    source: "(1 − 1/R) W / 8 [C]",
  },
]);

export const STATIC_CURVE_CHECKS = toChecks("static-curves", {
  ...Object.fromEntries([...points, ...knees]),
  "two-paths": {
    what: "two equal paths in phase, one held 6 dB under its drive",
    compute: () => twoPathLossDb(6, 0.5),
    expected: 2.4919,
    tolerance: 0.0001,
    unit: "dB",
    source: "−20 lg(1 − ρ + ρ 10^(−c/20)) [C]",
  },
});
