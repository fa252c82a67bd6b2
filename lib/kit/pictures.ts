/** Pictures of a publication as bytes. */
import { Resvg } from "@resvg/resvg-js";
import type { Figure } from "../charts/figure";
import { toSvg } from "../charts/svg-text";
import type { Snapshot } from "../publication/snapshot-schema";
import { toCardFigure } from "./card-figure";
import { LINK_CARD, WIDE_CARD, type CardSize } from "./card-layout";
import { toAltText } from "./kit-words";
import { outlineFigure } from "./outlines";
import type { Standing } from "./standing";
import { toStandingSentence } from "./standing";

export const THEMES = ["light", "dark"] as const;
export type Theme = (typeof THEMES)[number];

interface PictureInput {
  snapshot: Snapshot;
  standing: Standing;
  theme: Theme;
}

/** The card as SVG, its text as outlines: looks the same with any fonts. */
export const toCardSvg = (input: PictureInput): string => drawSvg(input, WIDE_CARD);

/** The card as PNG, 1280 x 720. */
export const toCardPng = (input: PictureInput): Uint8Array =>
  rasterise(drawSvg(input, WIDE_CARD), 1280);

/** The picture of a link preview, 1200 x 630. */
export const toLinkPng = (input: PictureInput): Uint8Array =>
  rasterise(drawSvg(input, LINK_CARD), 1200);

function drawSvg({ snapshot, standing, theme }: PictureInput, size: CardSize): string {
  const label =
    standing.state === "withdrawn"
      ? (toStandingSentence(snapshot.revision, standing) ?? "")
      : toAltText(snapshot);
  return toSvgFile(toCardFigure(snapshot, size, standing), { theme, label });
}

/** @returns an SVG file with one theme's colours and no text that needs a font. */
export const toSvgFile = (
  figure: Figure,
  { theme, label }: { theme: Theme; label: string },
): string =>
  `${toSvg(outlineFigure(figure), { id: "f", label, toColour: (paint) => paint[theme] }).text}\n`;

/** @param widthPx of the picture; the height follows */
export function rasterise(svg: string, widthPx: number): Uint8Array {
  const drawn = new Resvg(svg, {
    fitTo: { mode: "width", value: widthPx },
    font: { loadSystemFonts: false },
  });
  return new Uint8Array(drawn.render().asPng());
}
