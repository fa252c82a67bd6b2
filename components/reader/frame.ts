/** The frame of every page for readers: head, header and footer; no script of the application. */
import { COLOURS, levelRamp, toCss } from "@/lib/charts/tokens";
import type { HearingNotice } from "@/lib/exposure/notices";
import { asHtml, html, type Html, type HtmlPart } from "@/lib/html/html";

interface ReaderPage {
  title: string;
  description: string;
  /** Absolute address that names this page; left out where the page is private. */
  canonical?: string;
  /** Search engines stay away. */
  hidden?: boolean;
  script?: boolean;
  current?: "published" | "compare" | "how";
  /** More elements for the head. */
  head?: HtmlPart;
  body: HtmlPart;
  footer: HtmlPart;
}

/** A whole document. */
export function toReaderPage(page: ReaderPage): string {
  return html`<!doctype html>
    <html lang="en-GB">
      <head>
        <meta charset="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <title>${page.title} · Tidemark</title>
        <meta name="description" content="${page.description}" />
        <meta name="color-scheme" content="light dark" />
        ${page.hidden && asHtml('<meta name="robots" content="noindex, nofollow">\n')}${
          page.canonical !== undefined && html`<link rel="canonical" href="${page.canonical}" /> `
        }
        <link rel="icon" href="/icon.svg" type="image/svg+xml" />
        <link
          rel="preload"
          href="/fonts/atkinson-hyperlegible-next.woff2"
          as="font"
          type="font/woff2"
          crossorigin
        />
        <link rel="stylesheet" href="/reader.css" />
        ${page.script && asHtml('<script src="/reader.js" defer></script>\n')}${page.head}
      </head>
      <body>
        <a class="skip" href="#content">Skip to the content</a>
        <header class="bar">
          <a class="brand" href="/published">${BRAND_MARK}Tidemark</a>
          <nav aria-label="Main">
            ${(
              [
                ["published", "/published", "Published tests"],
                ["compare", "/published/compare", "Compare"],
                ["how", "/how-we-measure", "How we measure"],
              ] as const
            ).map(
              ([room, href, words]) =>
                html`<a href="${href}" ${page.current === room && asHtml(' aria-current="page"')}
                  >${words}</a
                > `,
            )}
          </nav>
        </header>
        <main id="content">${page.body}</main>
        <footer class="foot">${page.footer}</footer>
      </body>
    </html> `.text;
}

export const BRAND_MARK = toMark();

function toMark(): Html {
  const [, low, middle, high] = levelRamp(4);
  const paints = [COLOURS.ink, high?.fill, middle?.fill, low?.fill];
  const paths = [
    "M2 4h28v5H2z",
    "M9 9h14v6h-8.5L9 11.4z",
    "M14.5 15H23v6H9v-2.4z",
    "M9 21h14v7H9z",
  ];
  const drawn = paths.map((d, at) => {
    const paint = paints[at] ?? COLOURS.ink;
    return `<path fill="${toCss(paint)}" d="${d}"/>`;
  });
  return asHtml(
    `<svg width="28" height="28" viewBox="0 0 32 32" aria-hidden="true">${drawn.join("")}</svg>`,
  );
}

const TRIANGLE = asHtml(
  '<svg width="20" height="18" viewBox="0 0 24 22" aria-hidden="true"><path fill="#000" fill-rule="evenodd" d="M12 1 23.2 21H.8zM10.7 7.5l.5 7h1.6l.5-7zM12 15.7a1.5 1.5 0 1 0 0 3 1.5 1.5 0 0 0 0-3z"/></svg>',
);

/** A hearing notice, never dismissible and never themed. @param size slim: one line */
export function toNotice(notice: HearingNotice, size: "slim" | "block"): Html {
  return html`<div class="notice ${size} ${notice.signal.toLowerCase()}" role="note">
    <p class="signal">${TRIANGLE}${notice.signal}</p>
    <p class="words"><b>${notice.lead}</b> ${notice.text}</p>
  </div>`;
}
