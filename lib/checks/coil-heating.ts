/** A hot voice coil, docs/check-values.md section 11. */
import { toHeatLossDb, toRiseK } from "../analysis/voice-coil";
import { toChecks, type CheckRow } from "./check";

const COPPER = "20 lg(R/R0) on a voltage, copper 0.00393 per K, IEC 60028 [R23, M]";
const NETWORK = "10 W into 5.9 K/W, 21.24 s and 4.1 K/W, 1115.2 s [R15, C]";

const LOSSES = [
  [10, 0.33, 0.006],
  [25, 0.81, 0.006],
  [50, 1.558, 0.001],
  [75, 2.24, 0.006],
  [100, 2.879, 0.001],
  [150, 4.03, 0.006],
  [200, 5.038, 0.001],
  [250, 5.94, 0.006],
] as const;

const losses: [string, CheckRow][] = LOSSES.map(([riseK, lossDb, tolerance]) => [
  `loss-${riseK}`,
  {
    what: `coil ${riseK} K hotter: loss`,
    compute: () => toHeatLossDb(riseK),
    expected: lossDb,
    tolerance,
    unit: "dB",
    source: COPPER,
    worked: tolerance === 0.001 ? [42] : [],
  },
]);

const BRANCHES = [
  { kelvinPerWatt: 5.9, timeConstantS: 21.24 },
  { kelvinPerWatt: 4.1, timeConstantS: 1115.2 },
];
const TIMES = [
  [1, "1 s", 2.75, 0.093],
  [60, "60 s", 57.65, 1.774],
  [3600, "1 h", 98.38, 2.839],
] as const;

const times: [string, CheckRow][] = TIMES.flatMap(([timeS, after, riseK, lossDb]) => [
  [
    `rise-${timeS}`,
    {
      what: `woofer coil after ${after}: rise`,
      compute: () => toRiseK(10, BRANCHES, timeS),
      expected: riseK,
      tolerance: 0.01,
      unit: "K",
      source: NETWORK,
      worked: [43],
    },
  ],
  [
    `loss-after-${timeS}`,
    {
      what: `woofer coil after ${after}: loss`,
      compute: () => toHeatLossDb(toRiseK(10, BRANCHES, timeS)),
      expected: lossDb,
      tolerance: 0.001,
      unit: "dB",
      source: NETWORK,
      worked: [43],
    },
  ],
]);

export const COIL_CHECKS = toChecks("coil-heating", Object.fromEntries([...losses, ...times]));
