import { describe, expect, it } from "vitest";
import { LogTable, meanUniformInLog } from "./log-means";

const spectrum = (law: (bin: number) => number): Float64Array =>
  Float64Array.from({ length: 2000 }, (_, k) => law(k));
const means = (data: Float64Array, edges: number[], scale = 1): number[] => {
  const into = new Float64Array(edges.length - 1);
  meanUniformInLog(data, 2, Float64Array.from(edges), scale, new LogTable(), into);
  return [...into];
};

describe("meanUniformInLog", () => {
  it.each([
    ["a constant", () => 3, 3],
    // Mean of f over ln f from a to b: (b - a) / ln(b / a), in bins 50 to 100.
    ["a slope", (k: number) => k, 50 / Math.LN2],
    // Mean of f^8 (24 dB per octave as power): (b^8 - a^8) / (8 ln(b / a)).
    ["24 dB per octave", (k: number) => (k / 50) ** 8, 255 / (8 * Math.LN2)],
  ])("%s in an octave", (_, law, expected) => {
    expect(means(spectrum(law), [100, 200])[0]! / expected).toBeCloseTo(1, 2);
  });

  it("cells inside one bin interval interpolate", () => {
    expect(
      means(
        spectrum((k) => k),
        [100.2, 100.6],
      )[0],
    ).toBeCloseTo(50.2, 3);
  });

  it("neighbouring cells make up the cell that holds both", () => {
    const data = spectrum((k) => 1 + Math.sin(k / 3) ** 2);
    const step = 2 ** (1 / 24);
    const edges = [100, 100 * step, 100 * step ** 2];
    const [a, b] = means(data, edges) as [number, number];
    expect((a + b) / 2).toBeCloseTo(means(data, [edges[0]!, edges[2]!])[0]!, 3);
  });

  it("an order looks at its multiple", () => {
    expect(
      means(
        spectrum((k) => k),
        [100, 101],
        3,
      )[0],
    ).toBeCloseTo(150.75, 2);
  });

  it("has no value under the first bin or past the last", () => {
    expect(
      means(
        spectrum(() => 1),
        [1, 100, 3990, 4010],
      ),
    ).toEqual([Number.NaN, expect.closeTo(1, 9), Number.NaN]);
  });
});
