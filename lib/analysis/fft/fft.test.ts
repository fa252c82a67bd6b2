import FFT from "fft.js";
import { describe, expect, it } from "vitest";
import { planComplexFft } from "./complex-fft";
import { planRealFft, toFftSize } from "./real-fft";

/** Seeded uniform noise in -0.5 to 0.5 (a 32-bit linear congruential generator). */
function noise(count: number, seed = 1): Float64Array {
  let state = seed;
  return Float64Array.from({ length: count }, () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return state / 2 ** 32 - 0.5;
  });
}

function directDft(data: Float64Array): Float64Array {
  const size = data.length / 2;
  const out = new Float64Array(2 * size);
  for (let k = 0; k < size; k += 1) {
    for (let n = 0; n < size; n += 1) {
      const angle = (-2 * Math.PI * ((n * k) % size)) / size;
      out[2 * k]! += data[2 * n]! * Math.cos(angle) - data[2 * n + 1]! * Math.sin(angle);
      out[2 * k + 1]! += data[2 * n]! * Math.sin(angle) + data[2 * n + 1]! * Math.cos(angle);
    }
  }
  return out;
}

const worst = (a: ArrayLike<number>, b: ArrayLike<number>): number =>
  Array.from(a).reduce((w, x, i) => Math.max(w, Math.abs(x - b[i]!)), 0);
const toComplex = (real: Float64Array): Float64Array =>
  Float64Array.from({ length: 2 * real.length }, (_, i) => (i % 2 ? 0 : real[i / 2]!));

const SIZES = [
  1, 2, 3, 4, 5, 6, 8, 9, 10, 12, 15, 16, 18, 20, 24, 30, 32, 36, 40, 45, 60, 64, 72, 120, 128, 240,
  256, 480,
];

describe("planComplexFft", () => {
  it.each(SIZES)("%i points agree with the direct sum", (size) => {
    const data = noise(2 * size);
    const plan = planComplexFft(size);
    plan.data.set(data);
    expect(worst(plan.transform(), directDft(data))).toBeLessThan(1e-12 * size);
  });

  it("2^15 points agree with another implementation", () => {
    const size = 2 ** 15;
    const data = noise(2 * size, 7);
    const other = new FFT(size);
    const out = other.createComplexArray();
    other.transform(out, Array.from(data));
    const plan = planComplexFft(size);
    plan.data.set(data);
    expect(worst(plan.transform(), out)).toBeLessThan(1e-11);
  });

  it.each([0, 7, 11, 22, 2.5])("refuses %d points", (size) => {
    expect(() => planComplexFft(size)).toThrow(
      expect.objectContaining({ code: "analysis.argument" }),
    );
  });
});

describe("planRealFft", () => {
  it("refuses what its kernel cannot address, before it takes any memory", () => {
    expect(() => planRealFft(2 ** 28)).toThrow(
      expect.objectContaining({ code: "audio.too-large" }),
    );
  });

  it.each(SIZES.map((n) => 2 * n))("%i points: spectrum, power and the way back", (size) => {
    const samples = noise(size, size);
    const plan = planRealFft(size);
    const direct = directDft(toComplex(samples)).subarray(0, size + 2);
    plan.data.set(samples);
    expect(worst(plan.forward(), direct)).toBeLessThan(1e-12 * size);
    plan.data.set(samples);
    const power = plan.power();
    power.forEach((p, k) =>
      expect(Math.abs(p - direct[2 * k]! ** 2 - direct[2 * k + 1]! ** 2)).toBeLessThan(
        1e-11 * size,
      ),
    );
    plan.data.set(samples);
    const flat = Float64Array.from({ length: size + 2 }, (_, i) => (i % 2 ? 0 : 1));
    const product = new Float64Array(size + 2);
    expect(
      worst(
        plan.filter(plan.forwardPacked(), flat, { first: 0, last: size / 2, bins: product }),
        samples,
      ),
    ).toBeLessThan(1e-13 * size);
    expect(worst(product, direct)).toBeLessThan(1e-12 * size);
  });

  it("filter by a delay shifts round", () => {
    const size = 240;
    const samples = noise(size, 3);
    const plan = planRealFft(size);
    const impulse = new Float64Array(size);
    impulse[7] = 2;
    plan.data.set(impulse);
    const delay = plan.forward();
    plan.data.set(samples);
    const out = plan.filter(plan.forwardPacked(), delay);
    out.forEach((x, n) => expect(x).toBeCloseTo(2 * samples[(n - 7 + size) % size]!, 12));
  });

  it("keeps the energy (Parseval)", () => {
    const size = 4096 * 3;
    const samples = noise(size, 5);
    const plan = planRealFft(size);
    plan.data.set(samples);
    const power = plan.power();
    const spectral =
      power.reduce((sum, p, k) => sum + (k === 0 || k === size / 2 ? p : 2 * p), 0) / size;
    expect(spectral / samples.reduce((sum, x) => sum + x * x, 0)).toBeCloseTo(1, 12);
  });
});

describe("toFftSize", () => {
  it.each([
    [1, 2],
    [7, 8],
    [17, 18],
    [524_288, 524_288],
    [524_289, 589_824],
    [616_922, 655_360],
    [700_000, 786_432],
    [800_000, 983_040],
  ])("%i samples take %i points", (points, size) => {
    expect(toFftSize(points)).toBe(size);
  });
});
