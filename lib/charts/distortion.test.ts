import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import { toCurvePath, toPlotX, toPlotY } from "./curve-figure";
import { toDistortionFigure } from "./distortion";
import { MULTIPLE_LAYOUT, toMultiplePitch } from "./distortion-layout";
import { SHOWN_FIRST, toFloorPercent, toPercentCurve } from "./distortion-parts";
import { sayDistortion, sayOrders, toDistortionReadout } from "./distortion-words";
import { flattenShapes, type TextShape } from "./figure";
import { NBSP } from "./format";
import { toHarmonicRows } from "./harmonic-map";
import { COLOURS } from "./tokens";
import type { ResultRun } from "../result/result-schema";

const result = makeSampleResult();
function runAt(levelDb: number): ResultRun {
  const run = result.runs.find((one) => one.level_dB === levelDb && one.kind === "short-term");
  if (run === undefined) throw new Error(`no run at ${levelDb}`);
  return run;
}
const figureOf = (run: ResultRun, shown = SHOWN_FIRST) =>
  toDistortionFigure({ result, run, level: COLOURS.ink, shown, criterionPercent: 10 });

describe("scales of the distortion figure", () => {
  const figure = figureOf(runAt(96));
  it("spans the bands' outer edges and 0.01 to 30 %", () => {
    expect(figure.plot.width).toBe(810);
    expect(figure.xAxis.min).toBeCloseTo(35.48, 2);
    expect(figure.xAxis.max).toBeCloseTo(17_782.8, 0);
    expect(toPlotY(figure, 30)).toBe(figure.plot.y);
    expect(toPlotY(figure, 0.01)).toBe(figure.plot.y + 380);
    // lg 30/1 over lg 30/0.01 of 380 px
    expect(toPlotY(figure, 1) - figure.plot.y).toBeCloseTo(
      (380 * Math.log10(30)) / Math.log10(3000),
      1,
    );
  });
  it.each(result.bands.map((band, at) => [band.nominal_Hz, at] as const))(
    "has %d Hz in the middle of its band",
    (_, at) => {
      const hz = result.bands[at]?.exact_Hz ?? Number.NaN;
      expect(toPlotX(figure, hz)).toBeCloseTo(figure.plot.x + figure.bands.centre(at), 1);
    },
  );
  it("puts -40 dB on 1 %", () => {
    const right = flattenShapes(figure.over).filter(
      (s): s is TextShape => s.kind === "text" && s.role === "tick-right",
    );
    const tick = right.find((s) => s.text === "\u221240");
    expect((tick?.y ?? 0) - 4).toBeCloseTo(toPlotY(figure, 1), 1);
  });
  it("grows to 100 % where 30 % is not enough", () => {
    const run = {
      ...runAt(96),
      thd_percent: runAt(96).thd_percent.map((v) => (v === null ? null : v * 30)),
    };
    expect(figureOf(run).yAxis.max).toBe(100);
  });
});

describe("what is drawn of a component", () => {
  it("gives a harmonic in percent of the fundamental", () => {
    const run = runAt(102);
    const at = 110;
    const second = toPercentCurve(2, run);
    const h2 = run.harmonics[0]?.spl_dB[at] ?? Number.NaN;
    expect(second?.percent[at]).toBeCloseTo(100 * 10 ** ((h2 - (run.spl_dB[at] ?? 0)) / 20), 9);
  });
  it("draws a point certain, uncertain or not at all, never both", () => {
    const run = runAt(86);
    const figure = figureOf(run, [2]);
    const [certain, uncertain] = figure.curves;
    const quality = run.harmonics[0]?.quality ?? [];
    expect(quality).toContain("uncertain");
    expect(certain?.values.map((v) => v !== null)).toEqual(quality.map((q) => q === "measured"));
    expect(uncertain?.values.map((v) => v !== null)).toEqual(quality.map((q) => q === "uncertain"));
  });
  it("leaves nothing under the floor", () => {
    const run = runAt(76);
    const floor = toFloorPercent(run, [2, 3]);
    for (const curve of figureOf(run, [2, 3]).curves) {
      const under = curve.values.filter(
        (value, at) => value !== null && value < (floor[at] ?? 0) * 0.999,
      );
      expect(under).toEqual([]);
    }
  });
  it("has no line for an order that the run does not hold", () => {
    const run = { ...runAt(96), harmonics: [] };
    expect(figureOf(run, [0, 2]).curves.map((c) => c.key)).toEqual(["0", "0-uncertain"]);
  });
});

describe("end labels", () => {
  it("stand 14 px apart at least", () => {
    const labels = flattenShapes(figureOf(runAt(102), [0, 2, 3, 4, 5, 6]).over).filter(
      (s): s is TextShape => s.kind === "text" && s.role === "end-label",
    );
    const ys = labels.map((s) => s.y).toSorted((a, b) => a - b);
    const gaps = ys.slice(1).map((y, at) => y - (ys[at] ?? 0));
    expect(labels.length).toBeGreaterThan(4);
    expect(Math.min(...gaps)).toBeGreaterThanOrEqual(14 - 0.02);
  });
  it("are left out of the small figures", () => {
    const small = toDistortionFigure({
      result,
      run: runAt(96),
      level: COLOURS.ink,
      shown: [0, 2, 3],
      criterionPercent: 10,
      layout: MULTIPLE_LAYOUT,
    });
    expect(flattenShapes(small.over).some((s) => s.role === "end-label")).toBe(false);
  });
});

describe("the small figures", () => {
  it("keep within the width that a phone leaves them, and grow no further than laid out", () => {
    const margins = MULTIPLE_LAYOUT.left + MULTIPLE_LAYOUT.right;
    for (const width of [338, 360]) {
      const pitch = toMultiplePitch(width, 27);
      expect(margins + 27 * pitch).toBeLessThanOrEqual(width);
      expect(margins + 27 * (pitch + 0.1)).toBeGreaterThan(width);
    }
    expect(toMultiplePitch(800, 27)).toBe(MULTIPLE_LAYOUT.pitch);
  });
});

describe("paths", () => {
  it("break where a value is missing", () => {
    const place = {
      plot: { x: 0, y: 0, width: 100, height: 100 },
      xAxis: { min: 0, max: 10, log: false },
      yAxis: { min: 0, max: 10, log: false },
    };
    expect(toCurvePath(place, [0, 5, 7, 10], [0, 5, null, 10])).toBe("M0 100L50 50M100 0");
    expect(toCurvePath(place, [0, 5], [null, null])).toBe("");
  });
});

describe("words", () => {
  it("name the reference and the orders of a THD value", () => {
    const band = result.bands[17];
    if (band === undefined) throw new Error("no 2 kHz band");
    const { subject, items } = toDistortionReadout(band, runAt(96), [2, 9]);
    expect(subject.replaceAll(NBSP, " ")).toBe("2 kHz, 96 dB run");
    expect(items.find((item) => item.name === "THD_F")?.value).toMatch(/^\d.*% \(H2–H\d\)$/);
    // Nine times the upper edge of the 2 kHz band lies above 20 kHz.
    expect(items.find((item) => item.name === "H9")?.value).toBe("not assessed");
  });
  it("say in the noise where an order exists and cannot be resolved", () => {
    const band = result.bands[11];
    if (band === undefined) throw new Error("no 500 Hz band");
    const { items } = toDistortionReadout(band, runAt(76), [9]);
    expect(items.find((item) => item.name === "H9")?.value).toBe("in the noise");
  });
  it("say where the worst band lies", () => {
    expect(sayDistortion(result.bands, runAt(102)).replaceAll(NBSP, " ")).toMatch(
      /^Distortion of the 102 dB run: THD is largest at \d+ k?Hz, \d\.\d %$/,
    );
    expect(sayDistortion([], runAt(102))).toContain("below the noise in every band");
  });
  it.each([
    ["2-5", "H2–H5"],
    ["2", "H2"],
    ["", ""],
  ])("orders %s are said %s", (orders, said) => expect(sayOrders(orders)).toBe(said));
});

describe("the harmonic map", () => {
  const rows = toHarmonicRows(result.bands, runAt(96).file);
  it("has eight orders over all bands, and tells noise, value and absence apart", () => {
    expect(rows.map((row) => row.order)).toEqual([2, 3, 4, 5, 6, 7, 8, 9]);
    const states = new Set(rows.flatMap((row) => row.cells.map((cell) => cell.state)));
    expect(states).toEqual(new Set(["value", "noise", "absent"]));
  });
  it("has no second harmonic of 16 kHz under 20 kHz", () => {
    expect(rows[0]?.cells.at(-1)).toEqual({ state: "absent" });
  });
});
