import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import { toCompressionMap, toMapRows } from "./compression-map";
import { toPlotX, toPlotY } from "./curve-figure";
import { flattenShapes, type RectShape, type Shape, type TextShape } from "./figure";
import { toInputOutputFigure } from "./input-output";
import { causeKey, causeShapes, CAUSE_NAMES, decisionShapes } from "./marks";
import { toBandScale } from "./scales";
import { selectionShapes, tabShapes } from "./selection";
import { listPlainLevels, toSeriesLevels } from "./series-levels";
import { COLOURS } from "./tokens";

const result = makeSampleResult();
const bands = toBandScale(
  result.bands.map((band) => band.exact_Hz),
  30,
);
const texts = (shapes: readonly Shape[], role: string): TextShape[] =>
  flattenShapes(shapes).filter((s): s is TextShape => s.kind === "text" && s.role === role);
const rects = (shapes: readonly Shape[], role: string): RectShape[] =>
  flattenShapes(shapes).filter((s): s is RectShape => s.kind === "rect" && s.role === role);

describe("the compression map", () => {
  const rows = toMapRows(result);
  it("has the runs above the reference, then the long-term ones", () => {
    expect(rows.map((row) => `${row.kind} ${row.levelDb}`)).toEqual([
      "short-term 86",
      "short-term 96",
      "short-term 102",
      "long-term 102",
    ]);
  });
  it("prints sign and one decimal, and never a clean zero", () => {
    for (const cell of rows.flatMap((row) => row.cells))
      expect(cell.text).toMatch(/^[+\u2212]\d+\.\d$/);
  });
  it("greys what is under its uncertainty", () => {
    const figure = toCompressionMap(rows, bands);
    const grey = texts(figure.plot.shapes, "cell-uncertain");
    expect(grey.length).toBeGreaterThan(10);
    for (const text of grey) expect(text.fill).toBe(COLOURS.ink3);
  });
  it("hatches a cell in the noise and writes no number there", () => {
    const copy = makeSampleResult();
    for (const level of copy.bands[3]?.levels ?? []) level.compression_dB = null;
    const figure = toCompressionMap(toMapRows(copy), bands);
    expect(rects(figure.plot.shapes, "cell-noise")).toHaveLength(4);
    expect(
      texts(figure.plot.shapes, "cell-text").length +
        texts(figure.plot.shapes, "cell-uncertain").length,
    ).toBe(26 * 4);
  });
  it("brackets the lower bounds, with the reason", () => {
    const [words] = texts(toCompressionMap(rows, bands).plot.shapes, "lower-bound-words");
    expect(words?.text.replaceAll("\u00A0", " ")).toBe(
      "lower bound above 1 kHz: the coil cools during the sweep",
    );
  });
  it("shares origin and pitch with the wall", () => {
    const cells = rects(toCompressionMap(rows, bands).plot.shapes, "cell").slice(0, 27);
    expect(cells.map((cell) => cell.x)).toEqual(result.bands.map((_, at) => bands.left(at) + 1));
  });
});

describe("input against output", () => {
  const band = result.bands[2];
  if (band === undefined) throw new Error("no 63 Hz band");
  const figure = toInputOutputFigure({ band, levels: listPlainLevels(result.runs) });
  if (figure === null) throw new Error("no figure");
  it("has the same range on both axes: 2 dB beyond the expected levels", () => {
    expect(figure.xAxis).toEqual(figure.yAxis);
    const top = Math.max(...band.levels.map((level) => level.expected_dB ?? 0));
    expect(figure.xAxis.max).toBeCloseTo(top + 2, 6);
  });
  it("puts each run's square on its expected and measured level", () => {
    const points = rects(figure.over, "point");
    expect(points).toHaveLength(4);
    const loudest = band.levels.find((level) => level.level_dB === 102);
    expect((points[3]?.x ?? 0) + 4.5).toBeCloseTo(toPlotX(figure, loudest?.expected_dB ?? 0), 1);
    expect((points[3]?.y ?? 0) + 4.5).toBeCloseTo(toPlotY(figure, loudest?.spl_dB ?? 0), 1);
  });
  it("draws the interval as wide as it is", () => {
    const [interval] = rects(figure.under, "interval");
    const perDb = figure.plot.width / (figure.xAxis.max - figure.xAxis.min);
    expect(interval?.width).toBeCloseTo(1.3 * perDb, 0);
    expect(interval?.height).toBe(figure.plot.height);
  });
  it("hands the law on as numbers", () => {
    expect(figure.curves).toHaveLength(1);
    expect(figure.curves[0]?.values).toHaveLength(figure.xs.length);
  });
  it("has nothing to draw where every run is in the noise", () => {
    const levels = band.levels.map((level) =>
      Object.assign({ ...level }, { spl_dB: null, compression_dB: null }),
    );
    expect(toInputOutputFigure({ band: { ...band, levels }, levels: [] })).toBeNull();
  });
});

describe("levels of a series", () => {
  it("are ranked from the quietest, each once", () => {
    expect(toSeriesLevels([102, 76, 76, 96]).map((level) => [level.levelDb, level.rank])).toEqual([
      [76, 0],
      [96, 1],
      [102, 2],
    ]);
  });
  it("leave out long-term, closing and variant runs", () => {
    expect(
      listPlainLevels([
        { level_dB: 76, kind: "short-term" },
        { level_dB: 80, kind: "long-term" },
        { level_dB: 70, kind: "closing" },
        { level_dB: 90, kind: "short-term", variant: "port blocked" },
      ]).map((level) => level.levelDb),
    ).toEqual([76]);
  });
});

describe("the selection's tab", () => {
  it.each([0, 2, 13, 26])("keeps to the plot and points at band %d", (at) => {
    const [tab] = tabShapes(at, result.bands[at]?.nominal_Hz ?? 0, bands, 32);
    const d = tab?.kind === "path" ? tab.d : "";
    const xs = [...d.matchAll(/[MHL](-?[\d.]+)/g)].map((m) => Number(m[1]));
    expect(Math.min(...xs)).toBeGreaterThanOrEqual(-4);
    expect(Math.max(...xs)).toBeLessThanOrEqual(bands.width + 4);
    expect(d).toContain(`L${bands.centre(at)} 32`);
  });
  it("has a box that is open where it goes on", () => {
    const d = (open?: "foot" | "top") => {
      const [box] = selectionShapes(1, {
        bands,
        top: 0,
        foot: 50,
        ...(open === undefined ? {} : { open }),
      });
      return box?.kind === "path" ? box.d : "";
    };
    expect(d().endsWith("z")).toBe(true);
    expect(d("foot")).toBe("M29.5 50V0H60.5V50");
    expect(d("top")).toBe("M29.5 0V50H60.5V0");
  });
});

describe("marks", () => {
  it("has a shape for every cause and keys 1 to 8 for the decidable ones", () => {
    for (const cause of CAUSE_NAMES)
      expect(causeShapes(cause, COLOURS.ink).length).toBeGreaterThan(0);
    expect(causeKey("limiter")).toBe(1);
    expect(causeKey("unresolved")).toBe(8);
  });
  it("tells the three decisions apart by shape, not by colour alone", () => {
    const paints = { mark: COLOURS.overprint, onMark: COLOURS.onOverprint, edge: COLOURS.edge };
    const kinds = (["open", "confirmed", "changed"] as const).map((state) =>
      decisionShapes(state, paints)
        .map((s) => s.kind)
        .join("+"),
    );
    expect(new Set(kinds).size).toBe(3);
  });
});
