/**
 * A letter as HTML: one column, styles in the elements, nothing loaded from anywhere. Mail programs
 * that know dark themes get ours by the style element; the others see the light one.
 */
import { COLOURS, type ColourRole } from "../charts/tokens";
import { asHtml, html, type Html } from "../html/html";
import type { Letter } from "./letter";

const FONT =
  "'Atkinson Hyperlegible Next','Atkinson Hyperlegible',-apple-system,'Segoe UI',Helvetica,Arial,sans-serif";
const FIGURES = "'Roboto Mono',ui-monospace,Menlo,Consolas,monospace";

/** Class by colour role, for the dark theme; the light one stands in the elements. */
const DARK: Readonly<Record<string, string>> = {
  page: `background:${COLOURS.page.dark}`,
  sheet: `background:${COLOURS.sheet.dark};border-color:${COLOURS.ink.dark} ${COLOURS.rule.dark} ${COLOURS.rule.dark}`,
  ink: `color:${COLOURS.ink.dark}`,
  ink2: `color:${COLOURS.ink2.dark}`,
  rule: `border-color:${COLOURS.rule.dark}`,
  act: `background:${COLOURS.ink.dark};color:${COLOURS.onInk.dark}`,
  quote: `border-color:${COLOURS.overprint.dark};color:${COLOURS.ink.dark}`,
};

const STYLE = asHtml(
  `:root{color-scheme:light dark}@media (prefers-color-scheme:dark){${Object.entries(DARK)
    .map(([name, rules]) => `.${name}{${rules.replaceAll(";", "!important;")}!important}`)
    .join("")}}`,
);

const light = (role: ColourRole): string => COLOURS[role].light;

/** In words: pictures are not shown unasked. */
const BRAND = html`<span style="font:680 17px/22px ${FONT};letter-spacing:-.01em">Tidemark</span>`;

export function toLetterHtml(letter: Letter): string {
  const paragraph = (words: string): Html =>
    html`<p class="ink" style="margin:0 0 14px;color:${light("ink")}">${words}</p>`;
  const { facts, quote, action, choicesUrl } = letter;
  return html`<!doctype html>
    <html lang="en-GB">
      <head>
        <meta charset="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="color-scheme" content="light dark" />
        <meta name="supported-color-schemes" content="light dark" />
        <title>${letter.subject}</title>
        <style>
          ${STYLE}
        </style>
      </head>
      <body class="page" style="margin:0;padding:0;background:${light("page")}">
        <table
          role="presentation"
          class="page"
          width="100%"
          cellpadding="0"
          cellspacing="0"
          style="background:${light("page")}"
        >
          <tr>
            <td align="center" style="padding:28px 12px">
              <table
                role="presentation"
                width="100%"
                cellpadding="0"
                cellspacing="0"
                style="max-width:560px;text-align:left;font:400 16px/24px ${FONT}"
              >
                <tr>
                  <td class="ink" style="padding:0 4px 12px;color:${light("ink")}">
                    ${BRAND}<span class="ink2" style="color:${light("ink2")}">
                      · ${letter.sender}</span
                    >
                  </td>
                </tr>
                <tr>
                  <td
                    class="sheet"
                    style="padding:26px 28px 24px;background:${light("sheet")};border:1px solid ${light("rule")};border-top:4px solid ${light("ink")}"
                  >
                    <h1
                      class="ink"
                      style="margin:0 0 14px;font:680 23px/28px ${FONT};letter-spacing:-.012em;color:${light("ink")}"
                    >
                      ${letter.heading}
                    </h1>
                    ${letter.paragraphs.map(paragraph)} ${facts.length > 0 && toFacts(facts)}
                    ${
                      quote !== null &&
                      html`<blockquote
                        class="quote"
                        style="margin:0 0 18px;padding:2px 0 2px 14px;border-left:4px solid ${light("overprint")};color:${light("ink")}"
                      >
                        ${toLines(quote)}
                      </blockquote>`
                    }
                    ${action !== null && toAction(action)}
                    ${letter.notes.map(
                      (note) =>
                        html`<p
                          class="ink2"
                          style="margin:0 0 10px;font-size:14px;line-height:21px;color:${light("ink2")}"
                        >
                          ${note}
                        </p>`,
                    )}
                  </td>
                </tr>
                <tr>
                  <td
                    class="ink2"
                    style="padding:14px 4px 0;font-size:13px;line-height:19px;color:${light("ink2")}"
                  >
                    ${letter.reason}
                    ${
                      choicesUrl !== null &&
                      html`<a class="ink2" href="${choicesUrl}" style="color:${light("ink2")}"
                        >Choose your notices</a
                      >`
                    }
                  </td>
                </tr>
              </table>
            </td>
          </tr>
        </table>
      </body>
    </html> `.text;
}

const toLines = (words: string): Html[] =>
  words
    .trim()
    .split("\n")
    .map((line, at) => (at === 0 ? html`${line}` : html`<br />${line}`));

function toFacts(facts: Letter["facts"]): Html {
  return html`<table
    role="presentation"
    width="100%"
    cellpadding="0"
    cellspacing="0"
    style="margin:0 0 18px;font-size:15px;line-height:21px"
  >
    ${facts.map(
      ([label, value]) =>
        html`<tr>
          <td
            class="ink2 rule"
            width="128"
            valign="top"
            style="padding:6px 12px 6px 0;border-top:1px solid ${light("rule")};color:${light("ink2")};font:400 13px/21px ${FIGURES}"
          >
            ${label}
          </td>
          <td
            class="ink rule"
            valign="top"
            style="padding:6px 0;border-top:1px solid ${light("rule")};color:${light("ink")}"
          >
            ${value}
          </td>
        </tr>`,
    )}
  </table>`;
}

/** A button, and the address itself for whoever cannot press it. */
function toAction({ words, url }: NonNullable<Letter["action"]>): Html {
  return html`<p style="margin:4px 0 16px">
      <a
        class="act"
        href="${url}"
        style="display:inline-block;padding:11px 20px;background:${light("ink")};color:${light("onInk")};font-weight:680;text-decoration:none"
        >${words}</a
      >
    </p>
    <p
      class="ink2"
      style="margin:0 0 14px;font:400 12px/18px ${FIGURES};color:${light("ink2")};word-break:break-all"
    >
      ${url}
    </p>`;
}
