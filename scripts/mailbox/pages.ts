/** Pages of the local mailbox: the list, a mail, and the mail's own HTML for the frame in it. */
import { COLOURS, toCss } from "../../lib/charts/tokens";
import { asHtml, html, type HtmlPart } from "../../lib/html/html";
import { toClock, toLongDay } from "../../lib/time/time-words";
import type { KeptMail } from "./kept-mails";

const STYLE = asHtml(`
:root { color-scheme: light dark }
body { margin: 0; padding: 28px clamp(16px, 4vw, 48px); background: ${toCss(COLOURS.page)}; color: ${toCss(COLOURS.ink)};
  font: 16px/24px "Atkinson Hyperlegible Next", system-ui, sans-serif }
main { max-width: 860px; margin: 0 auto }
h1 { margin: 0 0 4px; font-size: 28px; line-height: 34px; overflow-wrap: anywhere }
p { margin: 0 0 12px } .quiet { color: ${toCss(COLOURS.ink2)} }
a { color: inherit } :focus-visible { outline: 3px solid ${toCss(COLOURS.overprint)}; outline-offset: 2px }
ul { list-style: none; margin: 22px 0 0; padding: 0; background: ${toCss(COLOURS.sheet)}; border: 1px solid ${toCss(COLOURS.rule)} }
li + li { border-top: 1px solid ${toCss(COLOURS.rule)} }
li a { display: grid; grid-template-columns: minmax(0, 1fr) auto; gap: 0 16px; padding: 11px 16px; text-decoration: none }
li a:hover { background: ${toCss(COLOURS.wash)} } li b { overflow-wrap: anywhere }
li span, dl, pre { font: 14px/21px "Roboto Mono", ui-monospace, monospace } li span { color: ${toCss(COLOURS.ink2)}; overflow-wrap: anywhere }
dl { display: grid; grid-template-columns: auto minmax(0, 1fr); gap: 2px 16px; margin: 12px 0 18px } dt { color: ${toCss(COLOURS.ink2)} } dd { margin: 0; overflow-wrap: anywhere }
iframe { box-sizing: border-box; width: 100%; height: 640px; border: 1px solid ${toCss(COLOURS.rule)}; background: ${toCss(COLOURS.sheet)} }
h2 { margin: 24px 0 8px; font-size: 19px } pre { margin: 0; padding: 16px; white-space: pre-wrap; overflow-wrap: anywhere; background: ${toCss(COLOURS.sheet)}; border: 1px solid ${toCss(COLOURS.rule)} }`);

function toPage(title: string, body: HtmlPart, refreshS: number | null = null): string {
  return html`<!doctype html>
    <html lang="en-GB">
      <head>
        <meta charset="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        ${refreshS !== null && html`<meta http-equiv="refresh" content="${refreshS}" />`}
        <title>${title}</title>
        <style>
          ${STYLE}
        </style>
      </head>
      <body>
        <main>${body}</main>
      </body>
    </html> `.text;
}

const REFRESH_S = 5;
const toTime = (at: Date): string => `${toLongDay(at, "UTC")} ${toClock(at, "UTC")} UTC`;

export function toListPage(mails: readonly KeptMail[]): string {
  return toPage(
    "Local mailbox",
    html`<h1>Local mailbox</h1>
      <p class="quiet">
        Mail of this installation ends here, and nothing leaves this machine, until
        TIDEMARK_SMTP_URL names a mail server. The page looks for new mail every ${REFRESH_S}
        seconds.
      </p>
      ${
        mails.length === 0
          ? html`<p>No mail yet. Invite somebody, or ask for a new password.</p>`
          : html`<ul>
              ${mails.map(
                (mail) =>
                  html`<li>
                    <a href="/mail/${mail.id}"
                      ><b>${mail.subject}</b><span>${toTime(mail.at)}</span
                      ><span>to ${mail.to}</span></a
                    >
                  </li>`,
              )}
            </ul>`
      }`,
    REFRESH_S,
  );
}

export function toMailPage(mail: KeptMail): string {
  return toPage(
    mail.subject,
    html`<p><a href="/">All mail</a></p>
      <h1>${mail.subject}</h1>
      <dl>
        <dt>to</dt>
        <dd>${mail.to}</dd>
        <dt>from</dt>
        <dd>${mail.from}</dd>
        <dt>came</dt>
        <dd>${toTime(mail.at)}</dd>
      </dl>
      <iframe
        title="The mail as HTML"
        src="/mail/${mail.id}/html"
        sandbox="allow-popups allow-popups-to-escape-sandbox"
      ></iframe>
      <h2>As text</h2>
      <pre>${linkAddresses(mail.text)}</pre>`,
  );
}

/** The mail as it came; its links open beside the mailbox. */
export const toFramed = (mail: KeptMail): string =>
  mail.html.replace("<head>", '<head><base target="_blank">');

export const toMissingPage = (): string =>
  toPage(
    "No such mail",
    html`<h1>There is no such mail</h1>
      <p>Only the newest are kept. <a href="/">All mail</a></p>`,
  );

function linkAddresses(text: string): HtmlPart {
  return text
    .split(/(https?:\/\/\S+)/)
    .map((part, at) =>
      at % 2 === 1 ? html`<a href="${part}" target="_blank" rel="noreferrer">${part}</a>` : part,
    );
}
