/** Pages without a client: HTML put together from text, everything escaped unless it is HTML already. */

/** Text that is HTML: made by `html` or, for what is known to be good, by `asHtml`. */
export class Html {
  constructor(readonly text: string) {}
  toString(): string {
    return this.text;
  }
}

export type HtmlPart = Html | string | number | null | undefined | false | readonly HtmlPart[];

const ESCAPES: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};

export const escapeHtml = (text: string): string =>
  text.replaceAll(/[&<>"']/g, (sign) => ESCAPES[sign] ?? sign);

/** What a function of ours has written as HTML or SVG. */
export const asHtml = (text: string): Html => new Html(text);

/** html`<p>${words}</p>`: words are escaped, Html is not, lists are joined, null and false are nothing. */
export function html(parts: TemplateStringsArray, ...values: readonly HtmlPart[]): Html {
  return new Html(parts.reduce((text, part, at) => text + toText(values[at - 1]) + part));
}

function toText(value: HtmlPart): string {
  if (value === null || value === undefined || value === false) return "";
  if (value instanceof Html) return value.text;
  if (typeof value === "string") return escapeHtml(value);
  if (typeof value === "number") return String(value);
  return value.map(toText).join("");
}
