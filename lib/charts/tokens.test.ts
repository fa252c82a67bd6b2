import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { mixOklab, toOklab } from "./oklab";
import { COLOURS, levelRamp, SILT, siltStep, SLATE, slateStep, toCss } from "./tokens";

const kebab = (name: string): string =>
  name
    .replace(/([A-Z])/g, "-$1")
    .replace(/(\d)/, "-$1")
    .toLowerCase();

describe("style sheet", () => {
  const css = readFileSync("app/globals.css", "utf8").toLowerCase();
  it.each(Object.entries(COLOURS))("repeats %s", (name, paint) => {
    expect(css).toContain(`--${kebab(name)}: ${toCss(paint).toLowerCase()};`);
  });
});

const luminance = (hex: string): number => {
  const value = Number.parseInt(hex.slice(1), 16);
  const linear = (c: number): number => {
    const v = (c & 255) / 255;
    return v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4;
  };
  return 0.2126 * linear(value >> 16) + 0.7152 * linear(value >> 8) + 0.0722 * linear(value);
};
/** WCAG 2 contrast ratio. */
const contrast = (one: string, other: string): number => {
  const [a, b] = [luminance(one), luminance(other)];
  return (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05);
};

describe.each(["light", "dark"] as const)("contrast, %s", (theme) => {
  const grounds = ["page", "sheet", "wash"] as const;
  it.each(["ink", "ink2", "ink3", "overprint", "fault"] as const)(
    "%s is readable on every ground",
    (text) => {
      for (const ground of grounds) {
        expect(contrast(COLOURS[text][theme], COLOURS[ground][theme])).toBeGreaterThanOrEqual(4.5);
      }
    },
  );
  it("control borders and lines reach 3:1 on the sheet", () => {
    for (const line of ["edge", "siltLine", "noiseLine"] as const) {
      expect(contrast(COLOURS[line][theme], COLOURS.sheet[theme])).toBeGreaterThanOrEqual(3);
    }
  });
  it("map cells are readable", () => {
    for (const step of [...SILT, ...SLATE]) {
      expect(contrast(step.text[theme], step.fill[theme])).toBeGreaterThanOrEqual(4.5);
    }
  });
  it.each([1, 2, 3, 4, 5, 6, 7, 9, 12])(
    "%d level lines reach 3:1 and lie in order of lightness",
    (count) => {
      const ramp = levelRamp(count);
      expect(ramp).toHaveLength(count);
      const lightness = ramp.map((level) => toOklab(level.fill[theme])[0]);
      const sorted = [...lightness].sort((x, y) => (theme === "light" ? y - x : x - y));
      expect(lightness).toEqual(sorted);
      for (const level of ramp)
        expect(contrast(level.line[theme], COLOURS.sheet[theme])).toBeGreaterThanOrEqual(3);
    },
  );
});

describe("level ramp", () => {
  it("keeps both ends and every even rank of a twelve-step ramp on the six-row's path", () => {
    const six = levelRamp(6);
    const eleven = levelRamp(11);
    expect(eleven.filter((_, rank) => rank % 2 === 0)).toEqual(six);
    expect(eleven[1]?.fill.light).toBe(mixOklab("#D1EBE6", "#A5D5D3", 0.5));
  });
  it("has nothing for no level", () => expect(levelRamp(0)).toEqual([]));
});

describe("mixing", () => {
  it.each([
    ["#000000", "#FFFFFF", 0, "#000000"],
    ["#000000", "#FFFFFF", 1, "#FFFFFF"],
    // OKLab lightness 0.5 is linear light 0.125: sRGB 0.3885 (Ottosson 2020).
    ["#000000", "#FFFFFF", 0.5, "#636363"],
    ["#144A7A", "#144A7A", 0.3, "#144A7A"],
  ])("%s to %s at %d is %s", (from, to, at, expected) =>
    expect(mixOklab(from, to, at)).toBe(expected),
  );
});

describe("steps", () => {
  it.each([
    [-0.3, 0],
    [0.44, 0],
    [0.46, 1],
    [0.99, 2],
    [2.96, 4],
    [5.9, 4],
    [6, 5],
  ])("silt of %d dB is step %d", (db, step) => expect(siltStep(db)).toBe(SILT[step]));
  it.each([
    [0.05, 0],
    [0.1, 1],
    [3, 4],
    [14, 5],
  ])("slate of %d %% is step %d", (percent, step) => expect(slateStep(percent)).toBe(SLATE[step]));
});
