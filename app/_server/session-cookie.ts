/** The cookie of a signed-in browser: an encrypted JWT that holds a session id and nothing else. */
import { decode } from "next-auth/jwt";
import { getEnvironment } from "../../lib/config/environment";
import { findCookie } from "../../lib/http/cookies";

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

export function isSecure(): boolean {
  return getEnvironment().publicUrl.startsWith("https://");
}

/** Cookies do not know ports: the name does, so that two installations on a machine get along. */
export function sessionCookieName(): string {
  const { port } = new URL(getEnvironment().publicUrl);
  const name = port === "" ? "tidemark-session" : `tidemark-session-${port}`;
  return isSecure() ? `__Secure-${name}` : name;
}

/** @returns null where there is no cookie, or it is not ours. */
export async function readSessionId(headers: Headers): Promise<string | null> {
  const cookie = findCookie(headers.get("cookie"), sessionCookieName());
  if (cookie === null) return null;
  return readSessionToken(cookie);
}

async function readSessionToken(token: string): Promise<string | null> {
  try {
    const jwt = await decode({ token, secret: getEnvironment().secrets.session });
    const id: unknown = jwt?.sessionId;
    return typeof id === "string" && UUID.test(id) ? id : null;
  } catch {
    // Not encrypted by us, or expired: nobody is signed in.
    return null;
  }
}
