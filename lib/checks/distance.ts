/** Distance, summing and air, docs/check-values.md section 9. */
import { toAirLossDbPerM } from "../analysis/air-absorption";
import { Plans } from "../analysis/cell-power";
import { twoPathLossDb } from "../analysis/onset/static-laws";
import { sumLevelsDb } from "../analysis/programme";
import { measureScale } from "../analysis/scale";
import { computeSeatLevelDbA } from "../exposure/seat-level";
import { seriesSchema } from "../series/series-schema";
import { toChecks, type CheckRow } from "./check";

const INVERSE = "inverse distance law, −20 lg(r/r0) [C]";
const ISO_9613 = "ISO 9613-1, formula [R21, C]";

const inTheOpen = (distanceM: number): number =>
  computeSeatLevelDbA({
    levelAt1mDbA: 100,
    turnedDownDb: 0,
    distanceM,
    room: "outdoors",
    pair: false,
  });

/** What a recording of 100 dB full scale becomes when it is referred to 1 m in a free field. */
async function referTo1m(environment: string, distanceM: number): Promise<number> {
  const series = seriesSchema.parse({
    loudspeaker: "Check",
    environment,
    distance_m: distanceM,
    stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 5, rate_Hz: 48_000 },
    calibration: { full_scale_dB: 100 },
    runs: [{ file: "run.wav", level_dB: 90 }],
  });
  const read = (file: string) => Promise.reject(new Error(`no recording ${file}`));
  return (await measureScale(series, read, new Plans())).fullScaleDb;
}

const level = (
  what: string,
  compute: () => number | Promise<number>,
  expected: number,
  source: string,
  worked: number[] = [],
  tolerance = 0.01,
): CheckRow => ({ what, compute, expected, tolerance, unit: "dB", source, worked });

const air = (
  frequencyHz: number,
  relativeHumidityPercent: number,
  metres: number,
  expected: number,
  tolerance: number,
  worked: number[] = [],
): CheckRow => ({
  what: `air over ${metres} m at ${frequencyHz} Hz, 20 °C, ${relativeHumidityPercent} % humidity`,
  compute: () =>
    metres * toAirLossDbPerM(frequencyHz, { temperatureC: 20, relativeHumidityPercent }),
  expected,
  tolerance,
  unit: "dB",
  source: ISO_9613,
  worked,
});

/** Section 9: octaves of 20 °C and 70 %, dB per kilometre, printed to a tenth, at the exact mid-band frequencies. */
const OCTAVES = [
  [-4, 63, 0.1],
  [-3, 125, 0.3],
  [-2, 250, 1.1],
  [-1, 500, 2.8],
  [0, 1000, 5],
  [1, 2000, 9],
  [2, 4000, 22.9],
  [3, 8000, 76.6],
] as const;

export const DISTANCE_CHECKS = toChecks("distance", {
  "10-m": level(
    "1 m at 100 dB, heard at 10 m in a free field",
    () => inTheOpen(10),
    80,
    INVERSE,
    [36],
  ),
  "2-m": level(
    "1 m at 100 dB, heard at 2 m in a free field",
    () => inTheOpen(2),
    93.98,
    INVERSE,
    [36],
  ),
  "from-2-m": level(
    "recorded at 2 m, referred to 1 m",
    () => referTo1m("anechoic", 2),
    106.02,
    INVERSE,
  ),
  "ground-plane": level(
    "recorded on the ground, referred to a free field",
    () => referTo1m("ground-plane", 1),
    93.98,
    "pressure doubles on the ground [C]",
  ),
  incoherent: level(
    "two equal sources of 90 dB, not coherent",
    () => sumLevelsDb([90, 90]),
    93.01,
    "sum of powers [C]",
    [37],
  ),
  unequal: level(
    "90 dB and 84 dB, not coherent",
    () => sumLevelsDb([90, 84]),
    90.97,
    "sum of powers [C]",
    [37],
  ),
  coherent: level(
    "two equal sources of 90 dB in phase, over one of them",
    () => 90 + twoPathLossDb(400, 0.5),
    96.02,
    "sum of pressures [C]",
    [37],
  ),
  "air-10k": air(10_000, 50, 10, 1.588, 0.016, [38]),
  "air-1k-70": air(1000, 70, 1000, 4.98, 0.05, [38]),
  "air-1k": air(1000, 50, 10, 0.047, 0.0005),
  "air-4k": air(4000, 50, 10, 0.3, 0.005),
  "air-8k": air(8000, 50, 10, 1.05, 0.005),
  "air-16k": air(16_000, 50, 10, 3.65, 0.005),
  "air-20k": air(20_000, 50, 10, 5.24, 0.005),
  "air-4k-dry": air(4000, 20, 10, 0.75, 0.005),
  "air-8k-dry": air(8000, 20, 10, 2.17, 0.005),
  "air-10k-dry": air(10_000, 20, 10, 2.84, 0.005),
  ...Object.fromEntries(
    OCTAVES.map(([n, nominalHz, dbPerKm]) => [
      `air-octave-${nominalHz}`,
      {
        ...air(1000 * 10 ** (0.3 * n), 70, 1000, dbPerKm, 0.05),
        what: `air over 1 km in the octave of ${nominalHz} Hz`,
        table: "air by octaves, 20 °C and 70 %",
      },
    ]),
  ),
});
