/** A figure of a screen as it leaves it: with its name over it, method line and hearing notice under it. */
import type { Figure, Shape } from "../charts/figure";
import { toLineShapes, wrapText, type TextLook } from "../charts/text-lines";
import { COLOURS } from "../charts/tokens";
import type { HearingNotice } from "../exposure/notices";
import { alertShapes, SAFETY } from "./brand-shapes";

export interface FrameWords {
  title: string;
  method: string;
  /** null where no level is shown. */
  notice: HearingNotice | null;
}

const MARGIN = 16;
const TITLE: TextLook = { family: "prose", size: 16, weight: 600 };
const WORDS: TextLook = { family: "prose", size: 12 };
const SIGNAL: TextLook = { family: "prose", size: 12, weight: 600 };
const STEP = 16;
const SIGNAL_WIDTH = 112;
/** Words need so much, however narrow the figure. */
const LEAST_WIDTH = 420;

/** @param measure width of a text, px: of the fonts that will draw it */
export function frameFigure(
  figure: Figure,
  { title, method, notice }: FrameWords,
  measure: (text: string, look: TextLook) => number,
): Figure {
  const width = Math.max(figure.width, LEAST_WIDTH) + 2 * MARGIN;
  const room = width - 2 * MARGIN;
  const wrap = (text: string, look: TextLook, px: number): string[] =>
    wrapText(text, px, (line) => measure(line, look));
  const titles = wrap(title, TITLE, room);
  const figureTop = MARGIN + titles.length * 20 + 8;
  const methodTop = figureTop + figure.height + 8;
  const methods = wrap(method, WORDS, room);
  const noticeTop = methodTop + methods.length * STEP + 8;
  const says =
    notice === null ? [] : wrap(`${notice.lead} ${notice.text}`, WORDS, room - SIGNAL_WIDTH - 24);
  const noticeHeight = notice === null ? 0 : says.length * STEP + 12;
  const height = noticeTop + noticeHeight + MARGIN;
  return {
    width,
    height,
    patterns: figure.patterns,
    shapes: [
      { kind: "rect", x: 0, y: 0, width, height, fill: COLOURS.sheet },
      ...toLineShapes(titles, {
        x: MARGIN,
        y: MARGIN + 14,
        step: 20,
        fill: COLOURS.ink,
        ...TITLE,
      }),
      { kind: "group", x: MARGIN, y: figureTop, shapes: figure.shapes },
      ...toLineShapes(methods, {
        x: MARGIN,
        y: methodTop + 12,
        step: STEP,
        fill: COLOURS.ink2,
        ...WORDS,
      }),
      ...(notice === null
        ? []
        : noticeShapes(notice, says, { y: noticeTop, width: room, height: noticeHeight })),
    ],
  };
}

function noticeShapes(
  { signal }: HearingNotice,
  lines: readonly string[],
  { y, width, height }: { y: number; width: number; height: number },
): Shape[] {
  const box = { kind: "rect", x: MARGIN, y, height } as const;
  const middle = y + height / 2;
  return [
    { ...box, width, fill: SAFETY.ground },
    { ...box, width: SIGNAL_WIDTH, fill: SAFETY[signal] },
    { ...box, width, stroke: SAFETY.text },
    { kind: "rect", x: MARGIN + SIGNAL_WIDTH, y, width: 1, height, fill: SAFETY.text },
    { kind: "group", x: MARGIN + 10, y: middle - 7, scale: 0.64, shapes: alertShapes(signal) },
    {
      kind: "text",
      x: MARGIN + 31,
      y: middle + 4.3,
      text: signal,
      fill: SAFETY.text,
      ...SIGNAL,
    },
    ...toLineShapes(lines, {
      x: MARGIN + SIGNAL_WIDTH + 12,
      y: y + 6 + 11.8,
      step: STEP,
      fill: SAFETY.text,
      ...WORDS,
    }),
  ];
}
