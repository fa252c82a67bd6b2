/** Writes by cookie come from our own pages; redirects stay on our host. */
import { AppError } from "../errors/app-error";

const SAFE_METHODS = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * @param publicUrl address under which people reach us; the request's own Host counts as well.
 * @throws AppError "request.origin" where a write carries no Origin or that of another site.
 */
export function checkOrigin(
  request: { method: string; headers: Headers },
  publicUrl: string,
): void {
  if (SAFE_METHODS.has(request.method)) return;
  const host = hostOf(request.headers.get("origin"));
  const own = [new URL(publicUrl).host, request.headers.get("host")];
  if (host !== null && own.includes(host)) return;
  throw new AppError(
    "request.origin",
    "This write did not come from a page of ours. Reload the page and try again; scripts use a token.",
  );
}

/**
 * A place to go to after sign-in.
 *
 * @returns path with query, "/" where the wish leaves our host or is no path.
 */
export function toSafePath(wish: string | null | undefined): string {
  if (wish === null || wish === undefined || !/^\/(?![/\\])/.test(wish)) return "/";
  const base = "http://here.invalid";
  try {
    const url = new URL(wish, base);
    return url.origin === base ? `${url.pathname}${url.search}` : "/";
  } catch {
    return "/";
  }
}

/** null where there is no origin, or one that no page of ours has ("null"). */
function hostOf(origin: string | null): string | null {
  return origin !== null && URL.canParse(origin) ? new URL(origin).host : null;
}
