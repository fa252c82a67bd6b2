/** The embedded card: a small page of its own, pinned to one revision, with links out of the frame. */
import { toReaderWall } from "@/lib/charts/reader-wall";
import { toSvg } from "@/lib/charts/svg-text";
import { asHtml, html, type Html } from "@/lib/html/html";
import {
  layOutCard,
  NARROW_CARD,
  WIDE_CARD,
  type CardLayout,
  type CardSize,
} from "@/lib/kit/card-layout";
import { toMarkWords, toName, toSource } from "@/lib/kit/kit-words";
import { toStandingSentence, type Standing } from "@/lib/kit/standing";
import type { Snapshot } from "@/lib/publication/snapshot-schema";
import { toAnswer, toMethodWords, toPublishedNotice } from "@/lib/reader/page-words";
import { BRAND_MARK, toNotice } from "./frame";

interface CardProps {
  snapshot: Snapshot;
  standing: Standing;
  /** null: as the reader's device. */
  theme: "light" | "dark" | null;
  /** Absolute address of the page behind the card. */
  page: string;
}

/** A whole document that fits 640 x 360 and 320 wide. */
export function toCardPage({ snapshot, standing, theme, page }: CardProps): string {
  const { model, maker } = snapshot.loudspeaker;
  const sentence = toStandingSentence(snapshot.revision, standing);
  const withdrawn = standing.state === "withdrawn";
  const notice = withdrawn ? null : toPublishedNotice(snapshot);
  return html`<!doctype html>
    <html lang="en-GB" ${theme !== null && asHtml(`data-theme="${theme}"`)}>
      <head>
        <meta charset="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <title>${toName(snapshot)}: how loud it plays</title>
        <meta name="robots" content="noindex" />
        <link rel="canonical" href="${page}" />
        <link rel="stylesheet" href="/card.css" />
      </head>
      <body>
        <main class="card">
          <p class="head">
            <a href="${page}" target="_blank" rel="noopener"><b>${model}</b> ${maker}</a>
            <span class="brand">${BRAND_MARK}Tidemark</span>
          </p>
          ${
            sentence !== null &&
            (withdrawn
              ? html`<h1 class="standing">${sentence}</h1>`
              : html`<p class="standing" role="note">${sentence}</p>`)
          }
          ${!withdrawn && toFindings(snapshot, standing, page)}
          <footer>
            ${notice !== null && toNotice(notice, "slim")}
            <p class="foot">
              ${!withdrawn && html`<span class="marks">${toMarkWords(snapshot)}</span>`}
              <span>${toSource(snapshot, standing.timeZone)}</span>
              <span class="brand">${BRAND_MARK}Tidemark</span>
            </p>
          </footer>
        </main>
      </body>
    </html> `.text;
}

function toFindings(snapshot: Snapshot, standing: Standing, page: string): Html {
  const [first, ...rest] = toAnswer(snapshot);
  return html`<h1>
      <a href="${page}" target="_blank" rel="noopener"
        ><span>${first}</span>${rest.map((one) => html` <span>${one}</span>`)}</a
      >
    </h1>
    <p class="method">${toMethodWords(snapshot)}</p>
    ${[WIDE_CARD, NARROW_CARD].map((size) => toWallSvg(snapshot, size, standing))}`;
}

function toWallSvg(snapshot: Snapshot, size: CardSize, standing: Standing): Html | false {
  const layout: CardLayout = layOutCard(snapshot, size, standing);
  if (layout.plotHeight === null) return false;
  const figure = toReaderWall(snapshot, {
    width: layout.width - 2 * layout.gutter + 6,
    plotHeight: layout.plotHeight,
    narrow: true,
  });
  const className = layout.narrow ? "wall narrow" : "wall wide";
  return toSvg(figure, {
    id: layout.narrow ? "n" : "w",
    className,
    label: `Output limit by band: ${toAnswer(snapshot).join(" ")}`,
  });
}
