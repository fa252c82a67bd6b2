/** Mixing colours evenly to the eye: sRGB through OKLab and back. */

type Triple = readonly [number, number, number];

const toLinear = (v: number): number => (v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4);
const fromLinear = (v: number): number =>
  v <= 0.0031308 ? v * 12.92 : 1.055 * v ** (1 / 2.4) - 0.055;

/** @param hex sRGB colour as "#RRGGBB". @returns lightness 0..1, a and b (Ottosson 2020). */
export function toOklab(hex: string): Triple {
  const value = Number.parseInt(hex.slice(1), 16);
  const r = toLinear(((value >> 16) & 255) / 255);
  const g = toLinear(((value >> 8) & 255) / 255);
  const b = toLinear((value & 255) / 255);
  const l = Math.cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
  const m = Math.cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
  const s = Math.cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
  return [
    0.2104542553 * l + 0.793617785 * m - 0.0040720468 * s,
    1.9779984951 * l - 2.428592205 * m + 0.4505937099 * s,
    0.0259040371 * l + 0.7827717662 * m - 0.808675766 * s,
  ];
}

/** @param lab lightness, a, b. @returns "#RRGGBB", clipped to sRGB. */
export function fromOklab([lightness, a, b]: Triple): string {
  const l = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
  const channels = [
    4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s,
    -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s,
    -0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s,
  ];
  return `#${channels
    .map((c) => Math.round(255 * Math.min(1, Math.max(0, fromLinear(c)))))
    .map((c) => c.toString(16).padStart(2, "0"))
    .join("")
    .toUpperCase()}`;
}

/** @param at 0 gives `from`, 1 gives `to`; even steps look even. */
export function mixOklab(from: string, to: string, at: number): string {
  const [l0, a0, b0] = toOklab(from);
  const [l1, a1, b1] = toOklab(to);
  const mix = (x: number, y: number): number => x + (y - x) * at;
  return fromOklab([mix(l0, l1), mix(a0, a1), mix(b0, b1)]);
}
