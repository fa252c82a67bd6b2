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
      twiddles: toTwiddles(points, points / radix),
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

/** Any odd radix by its definition: only ever the last, short passes. */
const oddRadix = (radix: number): Pass => {
  const roots = toTwiddles(radix, radix);
  return (x, y, w, points, stride) => {
    const part = points / radix;
    const s2 = 2 * stride;
    const span = part * s2;
    for (let p = 0; p < part; p += 1) {
      let tr = 1;
      let ti = 0;
      for (let q = 0; q < radix; q += 1) {
        for (let c = 0; c < s2; c += 2) {
          let sumR = 0;
          let sumI = 0;
          for (let m = 0; m < radix; m += 1) {
            const root = 2 * ((m * q) % radix);
            const at = p * s2 + m * span + c;
            sumR += x[at]! * roots[root]! - x[at + 1]! * roots[root + 1]!;
            sumI += x[at]! * roots[root + 1]! + x[at + 1]! * roots[root]!;
          }
          const to = (radix * p + q) * s2 + c;
          y[to] = sumR * tr - sumI * ti;
          y[to + 1] = sumR * ti + sumI * tr;
        }
        const nextR = tr * w[2 * p]! - ti * w[2 * p + 1]!;
        ti = tr * w[2 * p + 1]! + ti * w[2 * p]!;
        tr = nextR;
      }
    }
  };
};

const PASSES: Record<number, Pass> = { 2: radix2, 3: oddRadix(3), 4: radix4, 5: oddRadix(5) };
