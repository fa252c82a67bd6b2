/** A page for readers as a response: drawn once, named by its bytes, kept by shared caches for a minute. */
import { createHash } from "node:crypto";

/** A finished page, ready to be sent many times. */
export interface PackedPage {
  status: number;
  bytes: Uint8Array<ArrayBuffer>;
  etag: string;
}

/** Its own style sheet, script and fonts; nothing from anywhere else, and in nobody's frame. */
const POLICY = [
  "default-src 'none'",
  "script-src 'self'",
  "style-src 'self'",
  "font-src 'self'",
  "img-src 'self'",
  "base-uri 'none'",
  "form-action 'self'",
  "frame-ancestors 'none'",
].join("; ");

export function packPage(status: number, text: string): PackedPage {
  const bytes = new Uint8Array(Buffer.from(text, "utf8"));
  const etag = `"${createHash("sha256").update(bytes).digest("base64url").slice(0, 27)}"`;
  return { status, bytes, etag };
}

/** Held by shared caches for a minute; a browser asks again every time, mostly for nothing new. */
const SHARED_FOR_A_MINUTE = "public, max-age=0, s-maxage=60, must-revalidate";
const NOT_KEPT = "private, no-store";

/** @param shared false: for one reader alone, kept by nobody */
export function answerPage(request: Request, page: PackedPage, shared = true): Response {
  const headers = {
    "cache-control": shared ? SHARED_FOR_A_MINUTE : NOT_KEPT,
    "content-security-policy": POLICY,
    "referrer-policy": shared ? "strict-origin-when-cross-origin" : "same-origin",
    "x-content-type-options": "nosniff",
    "x-frame-options": "DENY",
    ...(shared ? { etag: page.etag } : {}),
  };
  if (shared && page.status === 200 && matches(request.headers.get("if-none-match"), page.etag)) {
    return new Response(null, { status: 304, headers });
  }
  return new Response(page.bytes, {
    status: page.status,
    headers: {
      ...headers,
      "content-type": "text/html; charset=utf-8",
    },
  });
}

const matches = (header: string | null, etag: string): boolean =>
  header !== null &&
  header.split(",").some((one) => one.trim().replace(/^W\//, "") === etag || one.trim() === "*");
