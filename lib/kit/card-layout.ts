/**
 * What stands on a card and where its lines break: the embedded card and the pictures share it.
 * Lengths are CSS px.
 */
import type { HearingNotice } from "../exposure/notices";
import type { Snapshot } from "../publication/snapshot-schema";
import { toAnswer, toMethodWords, toPublishedNotice } from "../reader/page-words";
import { wrapText, type TextLook } from "../charts/text-lines";
import { measureText } from "./outlines";
import { toStandingSentence, type Standing } from "./standing";

export interface CardSize {
  width: number;
  height: number;
}

export const WIDE_CARD: CardSize = { width: 640, height: 360 };
export const NARROW_CARD: CardSize = { width: 320, height: 490 };
/** 1200 x 630 for link previews, drawn at 1.875 times its size. */
export const LINK_CARD: CardSize = { width: 640, height: 336 };

const prose = (size: number, weight: 400 | 700): TextLook => ({ family: "prose", size, weight });
export const CARD_LOOKS = {
  name: prose(13, 700),
  maker: prose(13, 400),
  answer: prose(17, 700),
  method: prose(10.5, 400),
  standing: prose(12, 700),
  withdrawn: prose(17, 700),
  signal: prose(12, 700),
  notice: prose(12, 400),
  foot: { family: "figures", size: 10.5, weight: 400 },
} as const satisfies Record<string, TextLook>;

/** From line to line. */
export const CARD_STEPS = {
  answer: 21,
  method: 14.5,
  standing: 16,
  withdrawn: 22,
  notice: 15,
} as const;
export const CARD_HEAD = 30;
export const CARD_FOOT = 24;
const SIGNAL_WIDTH = 104;
export const SIGNAL_BAR = 24;
const NOTICE_PADDING = 7;
/** Above and below the lines of answer and method. */
const AIR = 8;
/** What a reader's wall needs besides its plot. */
const WALL_FRAME = 74;
const LEAST_PLOT = 60;

export interface CardLayout extends CardSize {
  narrow: boolean;
  gutter: number;
  /** One list of lines per sentence. */
  answer: string[][];
  method: string[];
  /** Replaced or withdrawn, and by what; empty for a live revision. */
  standing: string[];
  /** null where no level is shown. */
  notice: {
    signal: HearingNotice["signal"];
    lines: string[];
    height: number;
    textX: number;
  } | null;
  /** null where the figure is not shown: withdrawn, or no room. */
  plotHeight: number | null;
}

export function layOutCard(
  snapshot: Snapshot,
  { width, height }: CardSize,
  standing: Standing,
): CardLayout {
  const narrow = width < 480;
  const gutter = narrow ? 15 : 20;
  const room = width - 2 * gutter;
  const wrap = (text: string, look: TextLook, px = room): string[] =>
    wrapText(text, px, (line) => measureText(line, look));
  const withdrawn = standing.state === "withdrawn";
  const sentence = toStandingSentence(snapshot.revision, standing);
  const found = withdrawn ? null : toPublishedNotice(snapshot);
  const textX = narrow ? gutter : SIGNAL_WIDTH + 16;
  const notice =
    found === null
      ? null
      : toNotice(
          found,
          wrap(`${found.lead} ${found.text}`, CARD_LOOKS.notice, width - textX - gutter),
          { narrow, textX },
        );
  const answer = withdrawn ? [] : toAnswer(snapshot).map((one) => wrap(one, CARD_LOOKS.answer));
  const method = withdrawn ? [] : wrap(toMethodWords(snapshot), CARD_LOOKS.method);
  const said =
    sentence === null ? [] : wrap(sentence, CARD_LOOKS[withdrawn ? "withdrawn" : "standing"]);
  const taken =
    CARD_HEAD +
    said.length * CARD_STEPS.standing +
    answer.flat().length * CARD_STEPS.answer +
    method.length * CARD_STEPS.method +
    AIR +
    (notice?.height ?? 0) +
    CARD_FOOT;
  const plotHeight = Math.floor(height - taken - WALL_FRAME);
  return {
    width,
    height,
    narrow,
    gutter,
    answer,
    method,
    standing: said,
    notice,
    plotHeight: withdrawn || plotHeight < LEAST_PLOT ? null : plotHeight,
  };
}

function toNotice(
  { signal }: HearingNotice,
  lines: string[],
  { narrow, textX }: { narrow: boolean; textX: number },
): NonNullable<CardLayout["notice"]> {
  const text = lines.length * CARD_STEPS.notice + 2 * NOTICE_PADDING;
  return { signal, lines, textX, height: narrow ? SIGNAL_BAR + text : Math.max(SIGNAL_BAR, text) };
}
