/**
 * Complex FFT of 2^a * {1, 3, 5, 9, 15} points on interleaved doubles: self-sorting (Stockham)
 * passes of radix 4, then 2, 5 and 3. All tables and scratch belong to the plan.
 */
import { AnalysisError } from "../../errors/app-error";

type Pass = (
  from: Float64Array,
  to: Float64Array,
  twiddles: Float64Array,
  points: number,
  stride: number,
) => void;

interface Step {
  pass: Pass;
  twiddles: Float64Array;
  points: number;
  stride: number;
}

export interface ComplexFft {
  readonly size: number;
  /**
   * Forward transform sum z_n e^(-2 pi i n k / size), unscaled.
   * @param data [2 size] re, im interleaved; used as scratch.
   * @returns [2 size] either data or the plan's own buffer: valid until the next call.
   */
  transform(data: Float64Array): Float64Array;
}

/**
 * @param size 2^a * {1, 3, 5, 9, 15}, at least 1.
 * @throws AnalysisError "analysis.argument" for another size.
 */
export function planComplexFft(size: number): ComplexFft {
  const steps: Step[] = [];
  let points = size;
  for (let stride = 1; points > 1;) {
    const radix = [4, 2, 5, 3].find((r) => points % r === 0);
    if (radix === undefined)
      throw new AnalysisError("analysis.argument", `There is no FFT of ${size} points here.`);
    steps.push({
      pass: PASSES[radix] as Pass,
      twiddles: toStepTwiddles(points, points / radix, steps.at(-1)),
      points,
      stride,
    });
    points /= radix;
    stride *= radix;
  }
  if (!(size >= 1) || points !== 1)
    throw new AnalysisError("analysis.argument", `There is no FFT of ${size} points here.`);
  const own = new Float64Array(2 * size);
  return {
    size,
    transform(data) {
      let from: Float64Array = data;
      let to: Float64Array = own;
      for (const { pass, twiddles, points: n, stride } of steps) {
        pass(from, to, twiddles, n, stride);
        [from, to] = [to, from];
      }
      return from;
    },
  };
}

/** The table of a pass: every few entries of the one before, where that reaches far enough. */
function toStepTwiddles(points: number, count: number, before: Step | undefined): Float64Array {
  const every = before === undefined ? 0 : before.points / points;
  if (before === undefined || 2 * every * (count - 1) >= before.twiddles.length) {
    return toTwiddles(points, count);
  }
  const table = new Float64Array(2 * count);
  for (let p = 0; p < count; p += 1) {
    table[2 * p] = before.twiddles[2 * p * every]!;
    table[2 * p + 1] = before.twiddles[2 * p * every + 1]!;
  }
  return table;
}

/** [2 count] e^(-2 pi i p / points). */
export function toTwiddles(points: number, count: number): Float64Array {
  const table = new Float64Array(2 * count);
  for (let p = 0; p < count; p += 1) {
    const angle = (-2 * Math.PI * p) / points;
    table[2 * p] = Math.cos(angle);
    table[2 * p + 1] = Math.sin(angle);
  }
  return table;
}

// The passes index without bounds checks that the type system would ask for; sizes are the plan's.
const radix4: Pass = (x, y, w, points, stride) => {
  const quarter = points >> 2;
  const s2 = 2 * stride;
  const span = quarter * s2;
  for (let p = 0; p < quarter; p += 1) {
    const w1r = w[2 * p]!;
    const w1i = w[2 * p + 1]!;
    const w2r = w1r * w1r - w1i * w1i;
    const w2i = 2 * w1r * w1i;
    const w3r = w1r * w2r - w1i * w2i;
    const w3i = w1r * w2i + w1i * w2r;
    const base = p * s2;
    let o0 = 4 * base;
    for (let i = base; i < base + s2; i += 2, o0 += 2) {
      const j = i + span;
      const k = j + span;
      const l = k + span;
      const ar = x[i]!;
      const ai = x[i + 1]!;
      const br = x[j]!;
      const bi = x[j + 1]!;
      const cr = x[k]!;
      const ci = x[k + 1]!;
      const dr = x[l]!;
      const di = x[l + 1]!;
      const pr = ar + cr;
      const pi = ai + ci;
      const qr = ar - cr;
      const qi = ai - ci;
      const ur = br + dr;
      const ui = bi + di;
      const vr = br - dr;
      const vi = bi - di;
      const o1 = o0 + s2;
      const o2 = o1 + s2;
      const o3 = o2 + s2;
      y[o0] = pr + ur;
      y[o0 + 1] = pi + ui;
      const er = qr + vi;
      const ei = qi - vr;
      y[o1] = er * w1r - ei * w1i;
      y[o1 + 1] = er * w1i + ei * w1r;
      const fr = pr - ur;
      const fi = pi - ui;
      y[o2] = fr * w2r - fi * w2i;
      y[o2 + 1] = fr * w2i + fi * w2r;
      const gr = qr - vi;
      const gi = qi + vr;
      y[o3] = gr * w3r - gi * w3i;
      y[o3 + 1] = gr * w3i + gi * w3r;
    }
  }
};

const radix2: Pass = (x, y, w, points, stride) => {
  const half = points >> 1;
  const s2 = 2 * stride;
  const span = half * s2;
  for (let p = 0; p < half; p += 1) {
    const wr = w[2 * p]!;
    const wi = w[2 * p + 1]!;
    const base = p * s2;
    let o = 2 * base;
    for (let i = base; i < base + s2; i += 2, o += 2) {
      const er = x[i]! - x[i + span]!;
      const ei = x[i + 1]! - x[i + span + 1]!;
      y[o] = x[i]! + x[i + span]!;
      y[o + 1] = x[i + 1]! + x[i + span + 1]!;
      y[o + s2] = er * wr - ei * wi;
      y[o + s2 + 1] = er * wi + ei * wr;
    }
  }
};

const SIN_60 = Math.sin(Math.PI / 3);

const radix3: Pass = (x, y, w, points, stride) => {
  const part = points / 3;
  const s2 = 2 * stride;
  const span = part * s2;
  for (let p = 0; p < part; p += 1) {
    const w1r = w[2 * p]!;
    const w1i = w[2 * p + 1]!;
    const w2r = w1r * w1r - w1i * w1i;
    const w2i = 2 * w1r * w1i;
    const base = p * s2;
    let o = 3 * base;
    for (let i = base; i < base + s2; i += 2, o += 2) {
      const j = i + span;
      const k = j + span;
      const sr = x[j]! + x[k]!;
      const si = x[j + 1]! + x[k + 1]!;
      const dr = SIN_60 * (x[j + 1]! - x[k + 1]!);
      const di = SIN_60 * (x[k]! - x[j]!);
      const mr = x[i]! - 0.5 * sr;
      const mi = x[i + 1]! - 0.5 * si;
      y[o] = x[i]! + sr;
      y[o + 1] = x[i + 1]! + si;
      y[o + s2] = (mr + dr) * w1r - (mi + di) * w1i;
      y[o + s2 + 1] = (mr + dr) * w1i + (mi + di) * w1r;
      y[o + 2 * s2] = (mr - dr) * w2r - (mi - di) * w2i;
      y[o + 2 * s2 + 1] = (mr - dr) * w2i + (mi - di) * w2r;
    }
  }
};

const COS_72 = Math.cos((2 * Math.PI) / 5);
const COS_144 = Math.cos((4 * Math.PI) / 5);
const SIN_72 = Math.sin((2 * Math.PI) / 5);
const SIN_144 = Math.sin((4 * Math.PI) / 5);

const radix5: Pass = (x, y, w, points, stride) => {
  const part = points / 5;
  const s2 = 2 * stride;
  const span = part * s2;
  for (let p = 0; p < part; p += 1) {
    const w1r = w[2 * p]!;
    const w1i = w[2 * p + 1]!;
    const w2r = w1r * w1r - w1i * w1i;
    const w2i = 2 * w1r * w1i;
    const w3r = w1r * w2r - w1i * w2i;
    const w3i = w1r * w2i + w1i * w2r;
    const w4r = w2r * w2r - w2i * w2i;
    const w4i = 2 * w2r * w2i;
    const base = p * s2;
    let o = 5 * base;
    for (let i = base; i < base + s2; i += 2, o += 2) {
      const j = i + span;
      const k = j + span;
      const l = k + span;
      const m = l + span;
      const ar = x[j]! + x[m]!;
      const ai = x[j + 1]! + x[m + 1]!;
      const br = x[k]! + x[l]!;
      const bi = x[k + 1]! + x[l + 1]!;
      const cr = x[j]! - x[m]!;
      const ci = x[j + 1]! - x[m + 1]!;
      const dr = x[k]! - x[l]!;
      const di = x[k + 1]! - x[l + 1]!;
      const er = x[i]! + COS_72 * ar + COS_144 * br;
      const ei = x[i + 1]! + COS_72 * ai + COS_144 * bi;
      const fr = x[i]! + COS_144 * ar + COS_72 * br;
      const fi = x[i + 1]! + COS_144 * ai + COS_72 * bi;
      const gr = SIN_72 * ci + SIN_144 * di;
      const gi = -SIN_72 * cr - SIN_144 * dr;
      const hr = SIN_144 * ci - SIN_72 * di;
      const hi = -SIN_144 * cr + SIN_72 * dr;
      y[o] = x[i]! + ar + br;
      y[o + 1] = x[i + 1]! + ai + bi;
      const o1 = o + s2;
      const o2 = o1 + s2;
      const o3 = o2 + s2;
      const o4 = o3 + s2;
      y[o1] = (er + gr) * w1r - (ei + gi) * w1i;
      y[o1 + 1] = (er + gr) * w1i + (ei + gi) * w1r;
      y[o2] = (fr + hr) * w2r - (fi + hi) * w2i;
      y[o2 + 1] = (fr + hr) * w2i + (fi + hi) * w2r;
      y[o3] = (fr - hr) * w3r - (fi - hi) * w3i;
      y[o3 + 1] = (fr - hr) * w3i + (fi - hi) * w3r;
      y[o4] = (er - gr) * w4r - (ei - gi) * w4i;
      y[o4 + 1] = (er - gr) * w4i + (ei - gi) * w4r;
    }
  }
};

const PASSES: Record<number, Pass> = { 2: radix2, 3: radix3, 4: radix4, 5: radix5 };
