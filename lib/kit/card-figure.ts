/** The card as one figure: PNG, SVG and link preview are drawn from it. */
import type { Figure, Shape, TextShape } from "../charts/figure";
import { toReaderWall } from "../charts/reader-wall";
import { COLOURS, type Paint } from "../charts/tokens";
import type { Snapshot } from "../publication/snapshot-schema";
import { alertShapes, brandShapes, SAFETY } from "./brand-shapes";
import {
  CARD_FOOT,
  CARD_HEAD,
  CARD_LOOKS,
  CARD_STEPS,
  layOutCard,
  SIGNAL_BAR,
  type CardLayout,
  type CardSize,
} from "./card-layout";
import { toMarkWords, toSource } from "./kit-words";
import { toLineShapes } from "../charts/text-lines";
import { measureText } from "./outlines";
import type { Standing } from "./standing";

const SIGNAL_BOX = 104;

/** @param size WIDE_CARD, NARROW_CARD or LINK_CARD; everything fits into it */
export function toCardFigure(snapshot: Snapshot, size: CardSize, standing: Standing): Figure {
  const layout = layOutCard(snapshot, size, standing);
  const { width, height, gutter } = layout;
  const { shapes: words, foot } = wordShapes(layout);
  const wall =
    layout.plotHeight === null
      ? null
      : toReaderWall(snapshot, {
          width: width - 2 * gutter + 6,
          plotHeight: layout.plotHeight,
          narrow: true,
        });
  return {
    width,
    height,
    patterns: wall?.patterns ?? [],
    shapes: [
      { kind: "rect", x: 0, y: 0, width, height, fill: COLOURS.sheet },
      ...headShapes(snapshot, layout),
      ...words,
      ...(wall === null
        ? []
        : [{ kind: "group", x: gutter - 6, y: foot, shapes: wall.shapes } satisfies Shape]),
      ...noticeShapes(layout),
      ...footShapes(snapshot, layout, standing.timeZone),
      {
        kind: "rect",
        x: 0.5,
        y: 0.5,
        width: width - 1,
        height: height - 1,
        stroke: COLOURS.edge,
      },
    ],
  };
}

const MARK = 0.5;

function headShapes({ loudspeaker }: Snapshot, { width, gutter, narrow }: CardLayout): Shape[] {
  const y = 24;
  const { model, maker } = loudspeaker;
  const name: TextShape = {
    kind: "text",
    x: gutter,
    y,
    text: model,
    fill: COLOURS.ink,
    ...CARD_LOOKS.name,
  };
  const after = gutter + measureText(model, CARD_LOOKS.name) + 8;
  const brand = width - gutter - measureText("Tidemark", CARD_LOOKS.name);
  const room = (narrow ? width - gutter : brand - 30) - after;
  const shown = measureText(maker, CARD_LOOKS.maker) <= room;
  return [
    name,
    ...(shown
      ? [
          {
            kind: "text",
            x: after,
            y,
            text: maker,
            fill: COLOURS.ink2,
            ...CARD_LOOKS.maker,
          } satisfies Shape,
        ]
      : []),
    ...(narrow ? [] : brandAt(brand, y)),
  ];
}

const brandAt = (x: number, y: number): Shape[] => [
  { kind: "group", x: x - 20, y: y - 13, scale: MARK, shapes: brandShapes() },
  { kind: "text", x, y, text: "Tidemark", fill: COLOURS.ink, ...CARD_LOOKS.name },
];

/** Standing, answer and method. @returns foot: y under the last line */
function wordShapes({ gutter: x, standing, answer, method }: CardLayout): {
  shapes: Shape[];
  foot: number;
} {
  let y = CARD_HEAD;
  const shapes: Shape[] = [];
  const add = (
    lines: readonly string[],
    part: keyof typeof CARD_STEPS,
    ascent: number,
    fill: Paint,
  ): void => {
    const step = CARD_STEPS[part];
    shapes.push(...toLineShapes(lines, { x, y: y + ascent, step, fill, ...CARD_LOOKS[part] }));
    y += lines.length * step;
  };
  const withdrawn = answer.length === 0;
  add(standing, withdrawn ? "withdrawn" : "standing", withdrawn ? 24 : 12, COLOURS.fault);
  for (const [at, lines] of answer.entries()) {
    add(lines, "answer", 16.5, at === 0 ? COLOURS.ink : COLOURS.ink2);
  }
  add(method, "method", 11, COLOURS.ink2);
  return { shapes, foot: y };
}

function noticeShapes({ notice, width, height, narrow, gutter }: CardLayout): Shape[] {
  if (notice === null) return [];
  const top = height - CARD_FOOT - notice.height;
  const bar = narrow ? SIGNAL_BAR : notice.height;
  const textTop = narrow ? top + SIGNAL_BAR : top;
  const textHeight = notice.lines.length * CARD_STEPS.notice;
  const above = (height - CARD_FOOT - textTop - textHeight) / 2;
  const rule = (y: number): Shape => ({
    kind: "rect",
    x: 0,
    y: y - 0.5,
    width,
    height: 1,
    fill: SAFETY.text,
  });
  return [
    { kind: "rect", x: 0, y: top, width, height: notice.height, fill: SAFETY.ground },
    {
      kind: "rect",
      x: 0,
      y: top,
      width: narrow ? width : SIGNAL_BOX,
      height: bar,
      fill: SAFETY[notice.signal],
    },
    ...(narrow
      ? [rule(top + bar)]
      : [
          {
            kind: "rect",
            x: SIGNAL_BOX,
            y: top,
            width: 1,
            height: bar,
            fill: SAFETY.text,
          } satisfies Shape,
        ]),
    rule(top),
    rule(height - CARD_FOOT),
    {
      kind: "group",
      x: gutter - 5,
      y: top + bar / 2 - 7,
      scale: 0.62,
      shapes: alertShapes(notice.signal),
    },
    {
      kind: "text",
      x: gutter + 14,
      y: top + bar / 2 + 4.3,
      text: notice.signal,
      fill: SAFETY.text,
      ...CARD_LOOKS.signal,
    },
    ...toLineShapes(notice.lines, {
      x: notice.textX,
      y: textTop + above + 11.2,
      step: CARD_STEPS.notice,
      fill: SAFETY.text,
      ...CARD_LOOKS.notice,
    }),
  ];
}

/** What the marks mean, where there is room; who measured, and when. */
function footShapes(snapshot: Snapshot, layout: CardLayout, timeZone: string): Shape[] {
  const { width, height, gutter, narrow } = layout;
  const y = height - 8.5;
  const line = (text: string, x: number, anchor: "start" | "end"): Shape => ({
    kind: "text",
    x,
    y,
    text,
    anchor,
    fill: COLOURS.ink2,
    ...CARD_LOOKS.foot,
  });
  const source = toSource(snapshot, timeZone);
  const marks = layout.plotHeight === null ? "" : toMarkWords(snapshot);
  const room = width - 2 * gutter;
  if (narrow) return [line(source, gutter, "start"), ...brandAt(width - gutter - 54, y + 0.5)];
  const both = measureText(source, CARD_LOOKS.foot) + measureText(marks, CARD_LOOKS.foot) + 16;
  return [
    ...(both <= room && marks !== "" ? [line(marks, gutter, "start")] : []),
    line(source, width - gutter, "end"),
  ];
}
