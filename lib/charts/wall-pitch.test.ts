import { describe, expect, it } from "vitest";
import { toWallPitch } from "./wall-pitch";

describe("the wall's pitch", () => {
  it.each([
    // 27 bands: staff 76 px, key 132 px or 18 px of margin.
    ["desk", 1013, 27, 29.8, true],
    ["beside the band detail", 900, 27, 29.8, false],
    ["phone: the least, and it scrolls", 354, 27, 28.4, false],
    ["very wide: no wider than needed", 1900, 27, 44, true],
    ["few bands", 1013, 9, 44, true],
    ["no band", 1013, 0, 44, true],
  ])("%s", (_, width, bands, pitch, keyed) =>
    expect(toWallPitch(width, bands)).toEqual({ pitch, keyed }),
  );
});
