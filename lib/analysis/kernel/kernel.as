// The innermost loops of the engine, in AssemblyScript: passes of the complex FFT, where a complex number is one
// vector of two doubles, its real-data wrapping, and the likelihood of an onset. After a change write kernel-bytes.ts anew: npx tsx scripts/entries/kernel.ts
//
// Addresses are bytes in the memory of a plan; numbers lie re, im interleaved.

/** Sign bit of the first and of the second double. */
const SIGN_OF_RE: v128 = i64x2(<i64>0x8000000000000000, 0);
const SIGN_OF_IM: v128 = i64x2(0, <i64>0x8000000000000000);
const HALF: v128 = f64x2.splat(0.5);

const SIN_60: v128 = f64x2.splat(0.86602540378443864676);
const COS_72: v128 = f64x2.splat(0.30901699437494742410);
const COS_144: v128 = f64x2.splat(-0.80901699437494742410);
const SIN_72: v128 = f64x2.splat(0.95105651629515357212);
const SIN_144: v128 = f64x2.splat(0.58778525229247312917);

/** Bytes of a complex number. */
const ONE: usize = 16;

// @ts-ignore: decorator
@inline function add(a: v128, b: v128): v128 { return f64x2.add(a, b); }
// @ts-ignore: decorator
@inline function sub(a: v128, b: v128): v128 { return f64x2.sub(a, b); }
// @ts-ignore: decorator
@inline function scale(a: v128, b: v128): v128 { return f64x2.mul(a, b); }
// @ts-ignore: decorator
@inline function swap(a: v128): v128 { return v128.shuffle<f64>(a, a, 1, 0); }
/** -i a */
// @ts-ignore: decorator
@inline function timesMinusI(a: v128): v128 { return v128.xor(swap(a), SIGN_OF_IM); }
// @ts-ignore: decorator
@inline function conjugate(a: v128): v128 { return v128.xor(a, SIGN_OF_IM); }

/** (w.re, w.re) and (-w.im, w.im): what `times` wants of a factor. */
// @ts-ignore: decorator
@inline function reOf(w: v128): v128 { return v128.shuffle<f64>(w, w, 0, 0); }
// @ts-ignore: decorator
@inline function imOf(w: v128): v128 { return v128.xor(v128.shuffle<f64>(w, w, 1, 1), SIGN_OF_RE); }
// @ts-ignore: decorator
@inline function times(a: v128, re: v128, im: v128): v128 { return add(scale(a, re), scale(swap(a), im)); }

/**
 * A self-sorting (Stockham) pass.
 *
 * @param x what the pass before left; @param y receives; both the whole transform.
 * @param w [points / 4] e^(-2 pi i p / points)
 */
export function radix4(x: usize, y: usize, w: usize, points: i32, stride: i32): void {
  const rows: usize = <usize>points >> 2;
  const row: usize = <usize>stride * ONE;
  const span: usize = rows * row;
  for (let p: usize = 0; p < rows; p++) {
    const w1 = v128.load(w + p * ONE);
    const w1r = reOf(w1), w1i = imOf(w1);
    const w2 = times(w1, w1r, w1i);
    const w2r = reOf(w2), w2i = imOf(w2);
    const w3 = times(w2, w1r, w1i);
    const w3r = reOf(w3), w3i = imOf(w3);
    let i = x + p * row;
    let o = y + 4 * p * row;
    for (const end = i + row; i < end; i += ONE, o += ONE) {
      const a = v128.load(i);
      const b = v128.load(i + span);
      const c = v128.load(i + 2 * span);
      const d = v128.load(i + 3 * span);
      const even = add(a, c), evenRest = sub(a, c);
      const odd = add(b, d), oddRest = timesMinusI(sub(b, d));
      v128.store(o, add(even, odd));
      v128.store(o + row, times(add(evenRest, oddRest), w1r, w1i));
      v128.store(o + 2 * row, times(sub(even, odd), w2r, w2i));
      v128.store(o + 3 * row, times(sub(evenRest, oddRest), w3r, w3i));
    }
  }
}

/** As radix4, with [points / 2] factors. */
export function radix2(x: usize, y: usize, w: usize, points: i32, stride: i32): void {
  const rows: usize = <usize>points >> 1;
  const row: usize = <usize>stride * ONE;
  const span: usize = rows * row;
  for (let p: usize = 0; p < rows; p++) {
    const w1 = v128.load(w + p * ONE);
    const w1r = reOf(w1), w1i = imOf(w1);
    let i = x + p * row;
    let o = y + 2 * p * row;
    for (const end = i + row; i < end; i += ONE, o += ONE) {
      const a = v128.load(i);
      const b = v128.load(i + span);
      v128.store(o, add(a, b));
      v128.store(o + row, times(sub(a, b), w1r, w1i));
    }
  }
}

/** As radix4, with [points / 3] factors. */
export function radix3(x: usize, y: usize, w: usize, points: i32, stride: i32): void {
  const rows: usize = <usize>points / 3;
  const row: usize = <usize>stride * ONE;
  const span: usize = rows * row;
  for (let p: usize = 0; p < rows; p++) {
    const w1 = v128.load(w + p * ONE);
    const w1r = reOf(w1), w1i = imOf(w1);
    const w2 = times(w1, w1r, w1i);
    const w2r = reOf(w2), w2i = imOf(w2);
    let i = x + p * row;
    let o = y + 3 * p * row;
    for (const end = i + row; i < end; i += ONE, o += ONE) {
      const a = v128.load(i);
      const b = v128.load(i + span);
      const c = v128.load(i + 2 * span);
      const sum = add(b, c);
      const turned = scale(SIN_60, timesMinusI(sub(b, c)));
      const rest = sub(a, scale(HALF, sum));
      v128.store(o, add(a, sum));
      v128.store(o + row, times(add(rest, turned), w1r, w1i));
      v128.store(o + 2 * row, times(sub(rest, turned), w2r, w2i));
    }
  }
}

/** As radix4, with [points / 5] factors. */
export function radix5(x: usize, y: usize, w: usize, points: i32, stride: i32): void {
  const rows: usize = <usize>points / 5;
  const row: usize = <usize>stride * ONE;
  const span: usize = rows * row;
  for (let p: usize = 0; p < rows; p++) {
    const w1 = v128.load(w + p * ONE);
    const w1r = reOf(w1), w1i = imOf(w1);
    const w2 = times(w1, w1r, w1i);
    const w2r = reOf(w2), w2i = imOf(w2);
    const w3 = times(w2, w1r, w1i);
    const w3r = reOf(w3), w3i = imOf(w3);
    const w4 = times(w2, w2r, w2i);
    const w4r = reOf(w4), w4i = imOf(w4);
    let i = x + p * row;
    let o = y + 5 * p * row;
    for (const end = i + row; i < end; i += ONE, o += ONE) {
      const zero = v128.load(i);
      const one = v128.load(i + span);
      const two = v128.load(i + 2 * span);
      const three = v128.load(i + 3 * span);
      const four = v128.load(i + 4 * span);
      const a = add(one, four);
      const b = add(two, three);
      const c = timesMinusI(sub(one, four));
      const d = timesMinusI(sub(two, three));
      const e = add(add(zero, scale(COS_72, a)), scale(COS_144, b));
      const f = add(add(zero, scale(COS_144, a)), scale(COS_72, b));
      const g = add(scale(SIN_72, c), scale(SIN_144, d));
      const h = sub(scale(SIN_144, c), scale(SIN_72, d));
      v128.store(o, add(add(zero, a), b));
      v128.store(o + row, times(add(e, g), w1r, w1i));
      v128.store(o + 2 * row, times(add(f, h), w2r, w2i));
      v128.store(o + 3 * row, times(sub(f, h), w3r, w3i));
      v128.store(o + 4 * row, times(sub(e, g), w4r, w4i));
    }
  }
}

/** Of the packed transform's bins k and half - k: the even samples' part, and the odd samples' turned by e^(-2 pi i k / size). */
// @ts-ignore: decorator
@inline function evenOf(a: v128, b: v128): v128 { return scale(add(a, conjugate(b)), HALF); }
// @ts-ignore: decorator
@inline function oddOf(a: v128, b: v128, w: v128): v128 {
  return times(scale(timesMinusI(sub(a, conjugate(b))), HALF), reOf(w), imOf(w));
}

// @ts-ignore: decorator
@inline function square(a: v128): f64 {
  const parts = scale(a, a);
  return f64x2.extract_lane(parts, 0) + f64x2.extract_lane(parts, 1);
}

/**
 * |bin|^2 of bins 1 to half - 1 of real data, from its packed transform.
 *
 * @param z [half] packed; @param w [half / 2 + 1] e^(-2 pi i k / (2 half)); @param into [half + 1] doubles, another place.
 */
export function power(z: usize, w: usize, into: usize, half: i32): void {
  for (let k = 1; 2 * k <= half; k++) {
    const a = v128.load(z + <usize>k * ONE);
    const b = v128.load(z + <usize>(half - k) * ONE);
    const even = evenOf(a, b);
    const odd = oddOf(a, b, v128.load(w + <usize>k * ONE));
    f64.store(into + (<usize>k << 3), square(add(even, odd)));
    f64.store(into + (<usize>(half - k) << 3), square(sub(even, odd)));
  }
}

/**
 * One walk over the pairs (k, half - k): unpack, multiply by a transfer function, pack again, conjugated for
 * the way back by a forward transform.
 *
 * @param z [half] packed; @param transfer [half + 1]; @param into [half], may be z; @param share by which all is scaled.
 */
export function filter(z: usize, w: usize, transfer: usize, into: usize, half: i32, share: f64): void {
  const all = f64x2.splat(share);
  for (let k = 1; 2 * k <= half; k++) {
    const a = v128.load(z + <usize>k * ONE);
    const b = v128.load(z + <usize>(half - k) * ONE);
    const factor = v128.load(w + <usize>k * ONE);
    const even = evenOf(a, b);
    const odd = oddOf(a, b, factor);
    const ha = v128.load(transfer + <usize>k * ONE);
    const hb = v128.load(transfer + <usize>(half - k) * ONE);
    const low = times(ha, reOf(add(even, odd)), imOf(add(even, odd)));
    const high = conjugate(times(hb, reOf(conjugate(sub(even, odd))), imOf(conjugate(sub(even, odd)))));
    const e = scale(add(low, high), all);
    // Turned back: the conjugated factor.
    const rest = scale(sub(low, high), all);
    const o = times(rest, reOf(factor), imOf(conjugate(factor)));
    // i o, then e + i o and its partner, conjugated.
    const turned = v128.xor(swap(o), SIGN_OF_RE);
    v128.store(into + <usize>k * ONE, conjugate(add(e, turned)));
    v128.store(into + <usize>(half - k) * ONE, sub(e, turned));
  }
}

/** Bytes of a double. */
const DOUBLE: usize = 8;

/** Two rows of sums over levels begin. @param count even; @param sums, squares [count] */
export function startSums(sums: usize, squares: usize, count: i32, first: f64, second: f64): void {
  const one = f64x2.splat(first), two = f64x2.splat(second);
  for (let i: usize = 0; i < <usize>count * DOUBLE; i += ONE) {
    v128.store(sums + i, one);
    v128.store(squares + i, two);
  }
}

/** A level's losses join the sums: w l, and w l (l + 2 g). @param losses [count], may begin at any double. */
export function addLosses(losses: usize, sums: usize, squares: usize, count: i32, weight: f64, twiceGain: f64): void {
  const w = f64x2.splat(weight), g = f64x2.splat(twiceGain);
  for (let i: usize = 0; i < <usize>count * DOUBLE; i += ONE) {
    const loss = v128.load(losses + i);
    const weighted = scale(w, loss);
    v128.store(sums + i, add(v128.load(sums + i), weighted));
    v128.store(squares + i, add(v128.load(squares + i), scale(weighted, add(loss, g))));
  }
}

/**
 * -chi^2/2 with the common gain profiled out, and the logarithm of the prior of each place on top.
 *
 * @param row [count] receives it. @returns the largest.
 */
export function closeSums(sums: usize, squares: usize, places: usize, row: usize, count: i32, weights: f64): f64 {
  const all = f64x2.splat(weights), minusHalf = f64x2.splat(-0.5);
  let best = f64x2.splat(-Infinity);
  for (let i: usize = 0; i < <usize>count * DOUBLE; i += ONE) {
    const sum = v128.load(sums + i);
    const rest = sub(v128.load(squares + i), f64x2.div(scale(sum, sum), all));
    const value = add(scale(minusHalf, rest), v128.load(places + i));
    v128.store(row + i, value);
    best = f64x2.pmax(best, value);
  }
  return max(f64x2.extract_lane(best, 0), f64x2.extract_lane(best, 1));
}
