/** Where somebody at this very machine reads what an installation without a mail server sends. */
import { getEnvironment } from "../../lib/config/environment";

const LOOPBACK = new Set(["localhost", "127.0.0.1", "[::1]"]);

/** @returns null where mail goes out, or where people come from elsewhere: they cannot reach it. */
export function findLocalMailbox(): string | null {
  const { mailboxUrl, publicUrl } = getEnvironment();
  return LOOPBACK.has(new URL(publicUrl).hostname) ? mailboxUrl : null;
}
