import { describe, expect, it } from "vitest";
import { toEnvelopeFigure, type Envelope } from "./envelope";
import { flattenShapes } from "./figure";

const envelope: Envelope = {
  from_s: 1,
  to_s: 12,
  low: [-0.1, -0.2, -0.4],
  high: [0.1, 0.2, 0.4],
  from_Hz: 20,
  to_Hz: 20_000,
};
const shapesOf = (...args: Parameters<typeof toEnvelopeFigure>) =>
  flattenShapes(toEnvelopeFigure(...args).shapes);

describe("toEnvelopeFigure", () => {
  it("draws the loudest sample 25 px from the middle, whatever its level", () => {
    const wave = shapesOf({ envelope, place: null }).find((s) => s.role === "wave");
    expect(wave?.kind === "path" && wave.d.startsWith("M0 21.75L280 15.5L560 3L560 53")).toBe(true);
  });

  it("spreads frequencies evenly in lg f", () => {
    const ticks = shapesOf({ envelope, place: null }).filter((s) => s.role === "tick");
    const at = ticks.map((s) => (s.kind === "text" ? [s.text.replace("\u00a0", " "), s.x] : []));
    expect(at).toEqual([
      ["20 Hz", 0],
      ["63", 93.02],
      ["200", 186.67],
      ["630", 279.68],
      ["2k", 373.33],
      ["6.3k", 466.35],
      ["20 kHz", 560],
    ]);
  });

  it("shows times where no sweep was found", () => {
    const ticks = shapesOf({ envelope: { ...envelope, from_Hz: null, to_Hz: null }, place: null })
      .filter((s) => s.role === "tick")
      .map((s) => (s.kind === "text" ? s.text.replace("\u00a0", " ") : ""));
    expect(ticks).toEqual(["1 s", "6.5 s", "12 s"]);
  });

  it("marks the place of a fault, never narrower than 3 px", () => {
    const place = { from_s: 6.5, to_s: 6.5, missing: false };
    const rect = shapesOf({ envelope, place }).find((s) => s.role === "place");
    expect(rect).toMatchObject({ x: 280, width: 3 });
  });

  it("hatches what is missing and says so", () => {
    const place = { from_s: 9, to_s: 12, missing: true };
    const shapes = shapesOf({ envelope, place });
    expect(shapes.some((s) => s.kind === "text" && s.text === "nothing here")).toBe(true);
    const hatch = shapes.find((s) => s.role === "nothing-hatch");
    const xs = [...(hatch?.kind === "path" ? hatch.d.matchAll(/[ML]([\d.]+) /g) : [])].map((m) =>
      Number(m[1]),
    );
    expect(Math.min(...xs)).toBeGreaterThanOrEqual((8 / 11) * 560 - 0.01);
    expect(Math.max(...xs)).toBeLessThanOrEqual(560);
  });

  it("draws nothing but ground and axis for an empty recording", () => {
    const roles = shapesOf({ envelope: { ...envelope, low: [], high: [] }, place: null }).map(
      (s) => s.role,
    );
    expect(roles).not.toContain("wave");
    expect(roles).toContain("axis");
  });
});
