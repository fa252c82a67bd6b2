/** Harmonics of clipped, rectified and polynomial signals, docs/check-values.md section 5. */
import { overloadHarmonic, overloadLossDb } from "../analysis/onset/static-laws";
import { toChecks, type CheckRow } from "./check";
import { measureThroughSweep, type SweptBand } from "./through-sweep";
import { toHarmonics, toPercent, toShaped, toThdPercent, type Harmonics } from "./waves";

const CLOSED = "closed form, checked by FFT [C]";
const THD_SOURCE = "THD re fundamental, IEC 62257-1 [R13]";
/** Corners of a clipped wave leave this much to the quadrature, %. */
const CORNER = 0.002;

const clip = (limit: number) => (x: number) => Math.max(-limit, Math.min(limit, x));
const clipPositive = (limit: number) => (x: number) => Math.min(limit, x);
const toPolynomial =
  (...factors: number[]) =>
  (x: number) =>
    factors.reduce((sum, factor, i) => sum + factor * x ** (i + 1), 0);

const square = () => toHarmonics((phase) => (phase < Math.PI ? 1 : -1));
const triangle = () => toHarmonics((phase) => Math.abs(phase / Math.PI - 1));
const sawtooth = () => toHarmonics((phase) => phase / Math.PI - 1);
const halfWave = () => toHarmonics((phase) => Math.max(0, Math.sin(phase)));
const fullWave = () => toHarmonics((phase) => Math.abs(Math.sin(phase / 2)));

const percent = (
  what: string,
  compute: () => number | Promise<number>,
  expected: number,
  tolerance = 0.001,
  source = CLOSED,
  worked: number[] = [],
): CheckRow => ({ what, compute, expected, tolerance, unit: "%", source, worked });

const WAVES: Record<string, CheckRow> = {
  "square-thd": percent(
    "THD of a square wave, all orders",
    () => toThdPercent(square()),
    48.3426,
    0.001,
    THD_SOURCE,
    [21],
  ),
  "square-thd-10": percent(
    "THD of a square wave, orders 2 to 10",
    () => toThdPercent(square(), 10),
    42.879,
    0.001,
    CLOSED,
    [21],
  ),
  "triangle-thd": percent(
    "THD of a triangle wave",
    () => toThdPercent(triangle()),
    12.1153,
    0.001,
    THD_SOURCE,
    [22],
  ),
  "sawtooth-thd": percent(
    "THD of a sawtooth wave, all orders",
    () => toThdPercent(sawtooth()),
    80.3078,
    0.002,
    THD_SOURCE,
    [22],
  ),
  "sawtooth-thd-10": percent(
    "THD of a sawtooth wave, orders 2 to 10",
    () => toThdPercent(sawtooth(), 10),
    74.146,
    0.001,
  ),
  "half-wave-h2": percent(
    "half-wave rectified sine, second harmonic",
    () => toPercent(halfWave(), 2),
    42.441,
    0.001,
    CLOSED,
    [23],
  ),
  "half-wave-h4": percent(
    "half-wave rectified sine, fourth harmonic",
    () => toPercent(halfWave(), 4),
    8.488,
  ),
  "half-wave-thd": percent(
    "THD of a half-wave rectified sine",
    () => toThdPercent(halfWave()),
    43.524,
    0.001,
    CLOSED,
    [23],
  ),
  "full-wave-h2": percent(
    "full-wave rectified sine, second harmonic of 2f",
    () => toPercent(fullWave(), 2),
    20,
  ),
  "full-wave-thd": percent(
    "THD of a full-wave rectified sine re 2f",
    () => toThdPercent(fullWave()),
    22.7272,
  ),
};

/** Section 5's table: limit, drop of H1 in dB, H3, H5, H7, THD in %. */
const CLIPPED = [
  [0.9, -0.331, 3.2863, 2.2873, 1.1955, 4.2199],
  [0.7, -1.81, 13.3276, 2.4523, 1.9755, 13.7588],
  [0.5, -4.308, 22.6326, 4.5265, 1.6166, 23.2938],
] as const;

const clipped: [string, CheckRow][] = CLIPPED.flatMap(([limit, dropDb, h3, h5, h7, thd]) => {
  const law = (order: number) => overloadHarmonic("hard clip", 1 / limit, order, 20_000);
  const share = (order: number) => () => 100 * Math.abs(law(order) / law(1));
  const name = `sine clipped at ${limit} of its peak`;
  return [
    [
      `clip-${limit}-h1`,
      {
        what: `${name}: fundamental`,
        compute: () => -overloadLossDb("hard clip", -20 * Math.log10(limit)),
        expected: dropDb,
        tolerance: 0.001,
        unit: "dB",
        source: CLOSED,
        worked: [25],
      },
    ],
    [
      `clip-${limit}-h3`,
      percent(`${name}: third harmonic`, share(3), h3, CORNER, CLOSED, [24, 25, 26]),
    ],
    [
      `clip-${limit}-h5`,
      percent(`${name}: fifth harmonic`, share(5), h5, CORNER, CLOSED, [24, 26]),
    ],
    [`clip-${limit}-h7`, percent(`${name}: seventh harmonic`, share(7), h7, CORNER)],
    [
      `clip-${limit}-thd`,
      percent(
        `THD of a ${name}`,
        () => toThdPercent(toHarmonics(toShaped(clip(limit)))),
        thd,
        0.001,
        CLOSED,
        [24],
      ),
    ],
  ];
});

/** One-sided: limit, H2, H3, H4, H5, THD in %. */
const ONE_SIDED = [
  [0.9, 1.791, 1.6119, 1.3826, 1.1219, 3.2105],
  [0.7, 8.5313, 5.9719, 3.3101, 1.0988, 11.0758],
  [0.5, 17.1327, 8.5663, 1.7133, 1.7133, 19.4648],
] as const;

const oneSided: [string, CheckRow][] = ONE_SIDED.flatMap(([limit, ...expected]) => {
  const harmonics = () => toHarmonics(toShaped(clipPositive(limit)));
  const name = `sine clipped at ${limit} of its positive peak`;
  const rows: [string, CheckRow][] = [2, 3, 4, 5].map((order, i) => [
    `one-sided-${limit}-h${order}`,
    percent(
      `${name}: H${order}`,
      () => toPercent(harmonics(), order),
      expected[i] ?? Number.NaN,
      0.001,
      CLOSED,
      limit === 0.7 ? [27] : [],
    ),
  ]);
  rows.push([
    `one-sided-${limit}-thd`,
    percent(`THD of a ${name}`, () => toThdPercent(harmonics()), expected[4]),
  ]);
  return rows;
});

const weak = (amplitude: number): Harmonics =>
  toHarmonics(toShaped(toPolynomial(1, 0.02, 0.04), amplitude));
const strong = (): Harmonics => toHarmonics(toShaped(toPolynomial(1, 0.1, -0.2, 0.05, 0.08)));
const WEAK = "y = x + 0.02 x² + 0.04 x³";
const STRONG = "y = x + 0.1 x² − 0.2 x³ + 0.05 x⁴ + 0.08 x⁵";

const amplitude = (
  what: string,
  compute: () => number | Promise<number>,
  expected: number,
  worked: number[],
  tolerance = 1e-9,
): CheckRow => ({ what, compute, expected, tolerance, unit: "", source: CLOSED, worked });

const POLYNOMIALS: Record<string, CheckRow> = {
  "one-sided-0.7-dc": amplitude(
    "sine clipped at 0.7 of its positive peak: mean",
    () => toHarmonics(toShaped(clipPositive(0.7))).dc,
    -0.05009,
    [27],
    1e-5,
  ),
  "weak-h1": amplitude(
    `${WEAK} at amplitude 1: H1`,
    () => weak(1).amplitudes[1] ?? NaN,
    1.03,
    [28],
  ),
  "weak-h2": amplitude(
    `${WEAK} at amplitude 1: H2`,
    () => weak(1).amplitudes[2] ?? NaN,
    0.01,
    [28],
  ),
  "weak-h3": amplitude(
    `${WEAK} at amplitude 1: H3`,
    () => weak(1).amplitudes[3] ?? NaN,
    0.01,
    [28],
  ),
  "weak-dc": amplitude(`${WEAK} at amplitude 1: mean`, () => weak(1).dc, 0.01, [28]),
  "weak-thd": percent(
    `${WEAK} at amplitude 1: THD`,
    () => toThdPercent(weak(1)),
    1.373,
    0.0001,
    CLOSED,
    [28],
  ),
  "weak-half-h2": percent(
    `${WEAK} at amplitude 0.5: H2`,
    () => toPercent(weak(0.5), 2),
    0.49628,
    1e-5,
    CLOSED,
    [28],
  ),
  "weak-half-h3": percent(
    `${WEAK} at amplitude 0.5: H3`,
    () => toPercent(weak(0.5), 3),
    0.24814,
    1e-5,
    CLOSED,
    [28],
  ),
  "strong-dc": amplitude(`${STRONG}: mean`, () => strong().dc, 0.06875, [29]),
  ...Object.fromEntries(
    [0.9, 0.075, 0.025, 0.00625, 0.005].map((expected, i) => [
      `strong-h${i + 1}`,
      amplitude(`${STRONG}: H${i + 1}`, () => strong().amplitudes[i + 1] ?? NaN, expected, [29]),
    ]),
  ),
  "cubic-h1": amplitude(
    "x − (4/27) x³ at amplitude 1: H1",
    () => overloadHarmonic("cubic", 1, 1),
    1 - 1 / 9,
    [],
  ),
  "cubic-h3": amplitude(
    "x − (4/27) x³ at amplitude 1: H3",
    () => overloadHarmonic("cubic", 1, 3),
    -1 / 27,
    [],
  ),
};

/** One sweep serves several rows. */
const once = (law: (x: number) => number, bandHz: number): (() => Promise<SweptBand>) => {
  let swept: Promise<SweptBand> | undefined;
  return () => (swept ??= measureThroughSweep(law, bandHz));
};
const sweptPolynomial = once(toPolynomial(1, 0.1, 0.1), 1000);
const sweptClip = once(clip(0.7), 100);
const SWEPT = "sweep through y = x + 0.1 x² + 0.1 x³";
/** Half a percent, as the worked check states. */
const HALF = 0.005;

const THROUGH_SWEEP: Record<string, CheckRow> = {
  "swept-h1": amplitude(
    `${SWEPT}: linear part`,
    async () => (await sweptPolynomial()).first,
    1.075,
    [35],
    HALF * 1.075,
  ),
  "swept-h2": amplitude(
    `${SWEPT}: H2`,
    async () => (await sweptPolynomial()).harmonic(2),
    0.05,
    [35],
    HALF * 0.05,
  ),
  "swept-h3": amplitude(
    `${SWEPT}: H3`,
    async () => (await sweptPolynomial()).harmonic(3),
    0.025,
    [35],
    HALF * 0.025,
  ),
  // 0.1 dB: the engine's own tolerance for harmonics.
  "swept-clip-h3": percent(
    "sweep clipped at 0.7, read at 100 Hz: H3",
    async () => toShare(await sweptClip(), 3),
    13.3276,
    0.15,
  ),
  "swept-clip-h5": percent(
    "sweep clipped at 0.7, read at 100 Hz: H5",
    async () => toShare(await sweptClip(), 5),
    2.4523,
    0.028,
  ),
  "swept-clip-h7": percent(
    "sweep clipped at 0.7, read at 100 Hz: H7",
    async () => toShare(await sweptClip(), 7),
    1.9755,
    0.023,
  ),
};

function toShare(band: SweptBand, order: number): number {
  return (100 * band.harmonic(order)) / band.first;
}

export const HARMONICS_CHECKS = toChecks("harmonics", {
  ...WAVES,
  ...Object.fromEntries([...clipped, ...oneSided]),
  ...POLYNOMIALS,
  ...THROUGH_SWEEP,
});
