import { describe, expect, it } from "vitest";
import { makeSampleSnapshot } from "../../tests/support/sample-publication";
import { flattenShapes, type Shape, type TextShape } from "../charts/figure";
import type { Snapshot } from "../publication/snapshot-schema";
import { toCardFigure } from "./card-figure";
import { LINK_CARD, NARROW_CARD, WIDE_CARD, type CardSize } from "./card-layout";
import { measureText } from "./outlines";
import { toCardPng, toCardSvg, toLinkPng } from "./pictures";
import type { Standing } from "./standing";

const LIVE: Standing = {
  state: "live",
  replacedBy: null,
  withdrawn: null,
  timeZone: "Europe/London",
};
const REPLACED: Standing = {
  ...LIVE,
  state: "replaced",
  replacedBy: { revision: 2, at: new Date("2026-06-01T09:00:00Z") },
};
const WITHDRAWN: Standing = {
  ...LIVE,
  state: "withdrawn",
  withdrawn: { at: new Date("2026-06-01T09:00:00Z"), reason: "the wrong microphone file" },
};

const sizes: [string, CardSize][] = [
  ["wide", WIDE_CARD],
  ["narrow", NARROW_CARD],
  ["link", LINK_CARD],
];
const snapshot = makeSampleSnapshot();
const long: Snapshot = {
  ...snapshot,
  criterion: { thd_percent: 10, compression_dB: 3 },
  loudspeaker: {
    ...snapshot.loudspeaker,
    model: "Osier 8A studio monitor, limited edition",
    maker: "The very long-named Withy Lane loudspeaker company of the river bank",
  },
};

/** Texts with their place on the card. */
function placeTexts(shapes: readonly Shape[], dx = 0, dy = 0): TextShape[] {
  return shapes.flatMap((shape): TextShape[] => {
    if (shape.kind === "text") return [{ ...shape, x: shape.x + dx, y: shape.y + dy }];
    return shape.kind === "group"
      ? placeTexts(shape.shapes, dx + (shape.x ?? 0), dy + (shape.y ?? 0))
      : [];
  });
}
const wordsOf = (of: Snapshot, size: CardSize, standing: Standing): string =>
  placeTexts(toCardFigure(of, size, standing).shapes)
    .map((text) => text.text)
    .join(" ");

describe.each(sizes)("the %s card", (_, size) => {
  it("says answer, method, distance, weighting, criterion, notice and source", () => {
    const words = wordsOf(snapshot, size, LIVE);
    for (const part of [
      "Reached at least 101\u00a0dB at 1\u00a0m in every band",
      "unweighted, level at 1\u00a0m",
      "limit: 3\u00a0dB compression.",
      "WARNING",
      "not without hearing protection.",
      "Reedholm Test Lab, 14 May 2026",
      "Osier 8A",
    ]) {
      expect(words).toContain(part);
    }
  });

  it.each([
    ["live", LIVE],
    ["replaced", REPLACED],
    ["withdrawn", WITHDRAWN],
  ])("keeps every word on it, %s", (__, standing) => {
    for (const of of [snapshot, long]) {
      const texts = placeTexts(toCardFigure(of, size, standing).shapes);
      expect(texts.length).toBeGreaterThan(2);
      for (const text of texts) {
        const width = measureText(text.text, text);
        const left = text.x - width * { start: 0, middle: 0.5, end: 1 }[text.anchor ?? "start"];
        expect([text.text, left >= 0]).toEqual([text.text, true]);
        // The one name that may be longer than any card.
        if (text.text !== long.loudspeaker.model) {
          expect([text.text, left + width <= size.width]).toEqual([text.text, true]);
        }
        expect(text.y).toBeLessThan(size.height);
      }
    }
  });

  it("says what replaced it, and shows no level once withdrawn", () => {
    expect(wordsOf(snapshot, size, REPLACED)).toContain("replaced by revision 2 on 1 June 2026.");
    const words = wordsOf(snapshot, size, WITHDRAWN);
    expect(words).toContain("withdrawn on 1 June 2026: the wrong microphone file");
    expect(words).not.toContain("dB");
    const shapes = flattenShapes(toCardFigure(snapshot, size, WITHDRAWN).shapes);
    expect(shapes.some((shape) => shape.role === "water")).toBe(false);
  });
});

describe("pictures", () => {
  const sizeOf = (png: Uint8Array): [number, number] => {
    const view = new DataView(png.buffer, png.byteOffset);
    return [view.getUint32(16), view.getUint32(20)];
  };

  it("are of the size that they say", () => {
    const input = { snapshot, standing: LIVE, theme: "light" } as const;
    expect(sizeOf(toCardPng(input))).toEqual([1280, 720]);
    expect(sizeOf(toLinkPng(input))).toEqual([1200, 630]);
  });

  it("hold outlines in one theme's colours, and the finding in words", () => {
    const svg = toCardSvg({ snapshot, standing: LIVE, theme: "dark" });
    expect(svg).not.toContain("<text");
    expect(svg).not.toContain("light-dark");
    expect(svg).not.toContain("NaN");
    expect(svg).toContain("#0F2229");
    expect(svg).not.toContain("#FBFDFC");
    expect(svg).toMatch(/aria-label="Output limit of Osier 8A by Withy Lane in 27 third-octave/);
    expect(svg).toContain("WARNING.");
  });
});
