/** The plotter on the screen against the paths of files and print: the same pixels. */
import { build } from "esbuild";
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { toPlotX, toPlotY, type CurveFigure } from "../../lib/charts/curve-figure";
import { toDistortionFigure } from "../../lib/charts/distortion";
import { MULTIPLE_LAYOUT } from "../../lib/charts/distortion-layout";
import type { PathShape } from "../../lib/charts/figure";
import { toInputOutputFigure } from "../../lib/charts/input-output";
import { listPlainLevels } from "../../lib/charts/series-levels";
import { toStillFigure } from "../../lib/charts/still-figure";
import { COLOURS } from "../../lib/charts/tokens";
import { openBrowser } from "../support/browser";
import { makeSampleResult } from "../support/sample-result";

let browser: Browser;
let page: Page;

/** Draws a figure by the plotter and reports; then the same paths on a bare canvas of that size. */
const SCRIPT = `
  import uPlot from "uplot";
  import { toPlotterData, toPlotterOptions } from "./components/parts/plotter-options";
  window.compare = (figure, paths, points) => {
    const place = document.createElement("div");
    document.body.replaceChildren(place);
    const plotter = new uPlot(toPlotterOptions(figure, "light"), toPlotterData(figure), place);
    return new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(() => {
      const canvas = plotter.ctx.canvas;
      const own = document.createElement("canvas");
      own.width = canvas.width;
      own.height = canvas.height;
      const ctx = own.getContext("2d");
      const ratio = canvas.width / figure.plot.width;
      ctx.scale(ratio, ratio);
      ctx.translate(-figure.plot.x, -figure.plot.y);
      for (const path of paths) {
        ctx.strokeStyle = path.stroke;
        ctx.lineWidth = path.width;
        ctx.setLineDash(path.dash);
        ctx.stroke(new Path2D(path.d));
      }
      const inkOf = (from) => {
        const { data } = from.getContext("2d").getImageData(0, 0, canvas.width, canvas.height);
        return data.filter((_, at) => at % 4 === 3);
      };
      const [theirs, ours] = [inkOf(canvas), inkOf(own)];
      let inked = 0, apart = 0;
      theirs.forEach((ink, at) => {
        if (ink > 0 || ours[at] > 0) inked += 1;
        if (Math.abs(ink - ours[at]) > 128) apart += 1;
      });
      resolve({
        inked,
        apart,
        places: points.map(([x, y]) => [plotter.valToPos(x, "x"), plotter.valToPos(y, "y")]),
      });
    })));
  };`;

beforeAll(async () => {
  const bundle = await build({
    stdin: { contents: SCRIPT, resolveDir: process.cwd(), loader: "ts" },
    bundle: true,
    write: false,
    format: "iife",
    tsconfig: "tsconfig.json",
  });
  browser = await openBrowser();
  page = await (await browser.newContext({ deviceScaleFactor: 2 })).newPage();
  await page.addScriptTag({ content: bundle.outputFiles[0]?.text ?? "" });
});
afterAll(() => browser.close());

interface Compared {
  inked: number;
  apart: number;
  /** px from the plot's corner. */
  places: [x: number, y: number][];
}

function compare(figure: CurveFigure, points: readonly [number, number][]): Promise<Compared> {
  const paths = toStillFigure(figure)
    .shapes.filter((shape): shape is PathShape => shape.role === "curve" && shape.kind === "path")
    .map(({ d, stroke, strokeWidth, dash }) => ({
      d,
      stroke: stroke?.light,
      width: strokeWidth,
      dash: dash ?? [],
    }));
  const given = [figure, paths, points].map((one) => JSON.stringify(one)).join(",");
  return page.evaluate<Compared>(`compare(${given})`);
}

const failed = (): never => {
  throw new Error("the sample has two bands or more");
};
const result = makeSampleResult();
const [, , loud] = result.runs;
if (loud === undefined) throw new Error("the sample has three runs or more");
const io = toInputOutputFigure({
  band: result.bands[1] ?? failed(),
  levels: listPlainLevels(result.runs),
});
const distortion = (shown: number[], layout = {}): CurveFigure =>
  toDistortionFigure({
    result,
    run: loud,
    level: COLOURS.ink,
    shown,
    criterionPercent: 3,
    layout,
  });

const FIGURES: [name: string, figure: CurveFigure | null][] = [
  ["distortion, logarithmic both ways", distortion([0])],
  ["distortion with dashes", distortion([3, 5])],
  ["a small one", distortion([0, 2], MULTIPLE_LAYOUT)],
  ["input against output, straight both ways", io],
];

describe.each(FIGURES)("%s", (_, figure) => {
  if (figure === null) throw new Error("nothing was measured in the band");

  it("puts every value at the same place", async () => {
    const points = figure.curves.flatMap((curve) =>
      figure.xs.flatMap((x, at): [number, number][] => {
        const value = curve.values[at];
        return value === null || value === undefined ? [] : [[x, value]];
      }),
    );
    expect(points.length).toBeGreaterThan(5);
    const { places } = await compare(figure, points);
    for (const [at, [x, y]] of points.entries()) {
      const [theirX = NaN, theirY = NaN] = places[at] ?? [];
      // Ours is written with two decimals.
      expect(Math.abs(theirX + figure.plot.x - toPlotX(figure, x))).toBeLessThan(0.01);
      expect(Math.abs(theirY + figure.plot.y - toPlotY(figure, y))).toBeLessThan(0.01);
    }
  });

  it("inks the same pixels", async () => {
    // Where a dash begins is no matter of place: a plotter thins out points, and with them the length.
    const solid = figure.curves.map((curve) => ({ ...curve, dash: [] }));
    const { inked, apart } = await compare({ ...figure, curves: solid }, []);
    expect(inked).toBeGreaterThan(500);
    // Where lines join, a pixel in a hundred may differ by more than half its ink.
    expect(apart / inked).toBeLessThan(0.01);
  });
});
