/** A page for readers as a response: packed once, named by its bytes, kept by shared caches for a minute. */
import { createHash } from "node:crypto";
import { gzipSync } from "node:zlib";

/** A finished page, ready to be sent many times. */
export interface PackedPage {
  status: number;
  plain: Uint8Array<ArrayBuffer>;
  gzip: Uint8Array<ArrayBuffer>;
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
  const plain = new Uint8Array(Buffer.from(text, "utf8"));
  return {
    status,
    plain,
    gzip: new Uint8Array(gzipSync(plain, { level: 9 })),
    etag: createHash("sha256").update(plain).digest("base64url").slice(0, 27),
  };
}

/** Held by shared caches for a minute; a browser asks again every time, mostly for nothing new. */
const SHARED_FOR_A_MINUTE = "public, max-age=0, s-maxage=60, must-revalidate";
const NOT_KEPT = "private, no-store";

/** @param shared false: for one reader alone, kept by nobody */
export function answerPage(request: Request, page: PackedPage, shared = true): Response {
  const zipped = /\bgzip\b/.test(request.headers.get("accept-encoding") ?? "");
  const etag = `"${page.etag}${zipped ? "-gz" : ""}"`;
  const headers = {
    "cache-control": shared ? SHARED_FOR_A_MINUTE : NOT_KEPT,
    "content-security-policy": POLICY,
    "referrer-policy": shared ? "strict-origin-when-cross-origin" : "same-origin",
    "x-content-type-options": "nosniff",
    "x-frame-options": "DENY",
    vary: "accept-encoding",
    ...(shared ? { etag } : {}),
  };
  if (shared && page.status === 200 && matches(request.headers.get("if-none-match"), etag)) {
    return new Response(null, { status: 304, headers });
  }
  return new Response(zipped ? page.gzip : page.plain, {
    status: page.status,
    headers: {
      ...headers,
      "content-type": "text/html; charset=utf-8",
      ...(zipped ? { "content-encoding": "gzip" } : {}),
    },
  });
}

const matches = (header: string | null, etag: string): boolean =>
  header !== null &&
  header.split(",").some((one) => one.trim().replace(/^W\//, "") === etag || one.trim() === "*");
