/** Network address of a caller: counted against guessing, and shown; never trusted with more. */
import { subscribe } from "node:diagnostics_channel";
import type { IncomingMessage } from "node:http";

const HEADER = "x-forwarded-for";

/**
 * Writes the address of the connection into every request, over whatever its sender put there: who
 * could choose the address could guess passwords without end.
 *
 * @param behindProxy the server in front has the last word instead, and its entry stays.
 */
export function armClientAddress(behindProxy: boolean): void {
  if (behindProxy) return;
  // Node tells of a request here before anybody handles it.
  subscribe("http.server.request.start", (message) => {
    const { request } = message as { request: IncomingMessage };
    request.headers[HEADER] = request.socket.remoteAddress ?? "";
  });
}

/** The entry of the nearest hop: our own web server, or the one that stands in front of it. */
export function findIp(headers: Headers): string {
  const nearest = (headers.get(HEADER) ?? "").split(",").at(-1)?.trim() ?? "";
  return nearest === "" ? "unknown" : nearest.slice(0, 64);
}
