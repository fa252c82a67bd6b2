import { describe, expect, it } from "vitest";
import { compareTests } from "../compare/compare-tests";
import { fromSnapshot } from "../compare/compared-test";
import type { ComparedBand, ComparedTest } from "../compare/comparison-schema";
import { makeSampleSnapshot } from "../../tests/support/sample-publication";
import { toCompareFigure } from "./compare";
import { toMapKey } from "./compare-map";
import { differencePaint } from "./compare-paints";
import { flattenShapes, type Figure } from "./figure";

const CRITERION = { compression_dB: 3 };

function makeTest(id: string, bands: (band: ComparedBand) => Partial<ComparedBand>): ComparedTest {
  const candidate = fromSnapshot(makeSampleSnapshot(), { id, path: "/" }, CRITERION);
  if (!("test" in candidate)) throw new Error(candidate.unfit);
  const { test } = candidate;
  return { ...test, model: id, bands: test.bands.map((band) => ({ ...band, ...bands(band) })) };
}

const compare = (...tests: ComparedTest[]) =>
  compareTests(
    tests.map((test) => ({ test })),
    { criterion: CRITERION, kind: "short-term" },
  );
const byRole = (figure: Figure, role: string) =>
  flattenShapes(figure.shapes).filter((shape) => shape.role === role);
const textsOf = (figure: Figure, role: string) =>
  byRole(figure, role).flatMap((shape) => (shape.kind === "text" ? [shape.text] : []));

describe("toCompareFigure", () => {
  const comparison = compare(
    makeTest("Osier", () => ({})),
    makeTest("Fennel", (band) => ({ spl_dB: (band.spl_dB ?? 0) - 9 })),
    makeTest("Loom", (band) => (band.nominal_Hz === 40 ? { status: "below lowest" } : {})),
    makeTest("Harbour", (band) =>
      band.nominal_Hz === 40 ? { status: "not assessed", spl_dB: null } : {},
    ),
  );
  const figure = toCompareFigure(comparison, { pitch: 41 });

  it("draws the reference as a wall and one line for each", () => {
    expect(byRole(figure.plot, "reference")).toHaveLength(27);
    expect(byRole(figure.plot, "reached")).toHaveLength(4);
    expect(byRole(figure.plot, "not-reached")).toHaveLength(4);
    expect(byRole(figure.plot, "below-lowest")).toHaveLength(1);
    expect(textsOf(figure.key, "name")).toEqual(["Osier", "Fennel", "Loom", "Harbour"]);
    // The last ends in every band, so each name has its leader.
    expect(byRole(figure.key, "leader")).toHaveLength(4);
  });

  it("puts a cell under every band for every other test, as the words say it", () => {
    const cells = textsOf(figure.plot, "cell-text");
    expect(cells).toHaveLength(3 * 27);
    // Fennel at 50 Hz: both reached, 9 dB apart; at 1 kHz neither.
    expect(cells[1]).toBe("\u22129.0");
    expect(cells[14]).toBe("\u00b7");
    // Loom is Osier but for 40 Hz: no difference at 50 Hz.
    expect(cells[27 + 1]).toBe("no");
    expect(byRole(figure.plot, "cell-none").length).toBeGreaterThan(0);
  });

  it("keeps lines that lie on each other apart where nothing was reached", () => {
    const same = toCompareFigure(
      compare(
        makeTest("A", () => ({})),
        makeTest("B", () => ({})),
        makeTest("C", () => ({})),
      ),
      { pitch: 41 },
    );
    const yAt1k = byRole(same.plot, "not-reached").map((shape) => {
      const d = shape.kind === "path" ? shape.d : "";
      return Number(new RegExp(`M${14 * 41} ([\\d.]+)H`).exec(d)?.[1]);
    });
    const sorted = yAt1k.toSorted((a, b) => a - b);
    expect(sorted.every((y, at) => at === 0 || y - (sorted[at - 1] ?? 0) >= 4.5)).toBe(true);
  });

  it("grows its scale for a quiet loudspeaker, and stands with one test alone", () => {
    const quiet = toCompareFigure(compare(makeTest("Q", () => ({ spl_dB: 52 }))), { pitch: 30 });
    expect(textsOf(quiet.staff, "staff-numeral")).toContain("50");
    expect(textsOf(quiet.plot, "cell-text")).toEqual([]);
  });

  it("names in the key what a difference must pass", () => {
    const words = toMapKey(comparison).map((item) => item.words.replaceAll("\u00a0", " "));
    expect(words[2]).toMatch(/^no difference shown: under \d\.\d/);
    expect(words[3]).toBe("not known");
  });
});

describe("differencePaint", () => {
  it("steps by what is printed, silt for quieter and water for louder", () => {
    expect(differencePaint(2.96)).toBe(differencePaint(3));
    expect(differencePaint(2.94)).not.toBe(differencePaint(3));
    expect(differencePaint(-12)).toBe(differencePaint(-30));
    expect(differencePaint(-5)).not.toBe(differencePaint(5));
  });
});
