/**
 * A convenience ahead of pages: tells them their address and what they may load, and sends browsers
 * without a cookie to the sign-in. It decides nothing: pages and handlers look at the session
 * themselves.
 */
import { randomBytes } from "node:crypto";
import { type NextRequest, NextResponse } from "next/server";
import { PATH_HEADER } from "@/app/_server/path-header";
import { sessionCookieName } from "@/app/_server/session-cookie";
import { toContentSecurityPolicy } from "@/lib/http/content-security";

const PUBLIC = /^\/(sign-in|invitation|forgotten-password|reset-password|confirm-address)(\/|$)/;

export function proxy(request: NextRequest): NextResponse {
  const { pathname, search } = request.nextUrl;
  const path = `${pathname}${search}`;
  if (!PUBLIC.test(pathname) && !request.cookies.has(sessionCookieName())) {
    const target = request.nextUrl.clone();
    target.pathname = "/sign-in";
    target.search = pathname === "/" ? "" : `?next=${encodeURIComponent(path)}`;
    return NextResponse.redirect(target);
  }
  const nonce = randomBytes(16).toString("base64");
  const policy = toContentSecurityPolicy(nonce, process.env.NODE_ENV === "development");
  const headers = new Headers(request.headers);
  headers.set(PATH_HEADER, path);
  // Next.js reads the nonce for its own scripts from here.
  headers.set("content-security-policy", policy);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set("content-security-policy", policy);
  response.headers.set("x-frame-options", "DENY");
  response.headers.set("x-content-type-options", "nosniff");
  response.headers.set("referrer-policy", "same-origin");
  return response;
}

// Never under /api: the proxy would hold whole uploads in memory. Pages for readers have their own policy.
export const config = {
  matcher: [
    "/((?!api/|_next/|t/|preview/|published$|published/|how-we-measure$|oembed$|.*\\.[a-z0-9]+$).*)",
  ],
};
