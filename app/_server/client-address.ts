/**
 * Network address of the caller: the entry that the nearest hop wrote (our own web server where
 * none stands in front). Only counted and shown, never trusted.
 */
export function findIp(headers: Headers): string {
  const hops = (headers.get("x-forwarded-for") ?? "").split(",");
  const nearest = (hops.at(-1) ?? "").trim();
  return nearest === "" ? "unknown" : nearest.slice(0, 64);
}
