/** A page for readers as a response: drawn once, named by its bytes, kept by shared caches for a minute. */
import { createHash } from "node:crypto";

/** A finished page, ready to be sent many times. */
export interface PackedPage {
  status: number;
  bytes: Uint8Array<ArrayBuffer>;
  etag: string;
  mediaType: string;
  /** Beside those of every answer: the name of a download, who may read it. */
  headers?: Readonly<Record<string, string>>;
  /** A card: it alone may stand in a frame, of any origin. */
  framed?: boolean;
}

/** Its own style sheet and fonts, nothing from anywhere else; a card runs no script. */
const toPolicy = (framed: boolean): string =>
  [
    "default-src 'none'",
    `script-src ${framed ? "'none'" : "'self'"}`,
    "style-src 'self'",
    "font-src 'self'",
    "img-src 'self'",
    "base-uri 'none'",
    `form-action ${framed ? "'none'" : "'self'"}`,
    `frame-ancestors ${framed ? "*" : "'none'"}`,
  ].join("; ");

export const packPage = (status: number, text: string): PackedPage =>
  packBytes(status, "text/html; charset=utf-8", Buffer.from(text, "utf8"));

/** Anything that is not a page. */
export function packBytes(
  status: number,
  mediaType: string,
  content: Uint8Array,
  headers: Readonly<Record<string, string>> = {},
): PackedPage {
  const bytes = new Uint8Array(content);
  const etag = `"${createHash("sha256").update(bytes).digest("base64url").slice(0, 27)}"`;
  return { status, bytes, etag, mediaType, headers };
}

/** Held by shared caches for a minute; a browser asks again every time, mostly for nothing new. */
const SHARED_FOR_A_MINUTE = "public, max-age=0, s-maxage=60, must-revalidate";
const NOT_KEPT = "private, no-store";

/** Those of every answer, but for the page's own. */
const toHeaders = ({ framed = false }: PackedPage, shared: boolean) => ({
  "cache-control": shared ? SHARED_FOR_A_MINUTE : NOT_KEPT,
  "content-security-policy": toPolicy(framed),
  "referrer-policy": shared ? "strict-origin-when-cross-origin" : "same-origin",
  "x-content-type-options": "nosniff",
  ...(framed ? {} : { "x-frame-options": "DENY" }),
});

/** A page that is the same for everybody who asks, however they ask. */
export const answerAlways = (page: PackedPage): Response =>
  new Response(page.bytes, {
    status: page.status,
    headers: { ...toHeaders(page, true), "content-type": page.mediaType },
  });

/** @param shared false: for one reader alone, kept by nobody */
export function answerPage(request: Request, page: PackedPage, shared = true): Response {
  const headers = new Headers({
    ...toHeaders(page, shared),
    ...(shared ? { etag: page.etag } : {}),
    ...page.headers,
  });
  if (shared && page.status === 200 && matches(request.headers.get("if-none-match"), page.etag)) {
    return new Response(null, { status: 304, headers });
  }
  headers.set("content-type", page.mediaType);
  return new Response(page.bytes, { status: page.status, headers });
}

const matches = (header: string | null, etag: string): boolean =>
  header !== null &&
  header.split(",").some((one) => one.trim().replace(/^W\//, "") === etag || one.trim() === "*");
