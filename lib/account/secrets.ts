/** One-time secrets: invitation links and API tokens. Only their digests are stored. */
import { createHash, randomBytes } from "node:crypto";

export const TOKEN_PREFIX = "tdm_";
/** Characters of a token that are kept to tell it apart. */
const SHOWN = TOKEN_PREFIX.length + 6;

/** 256 random bits, 43 characters that need no escaping in a link. */
export function createSecret(): string {
  return randomBytes(32).toString("base64url");
}

/** A new API token and the start of it that may be shown later. */
export function createToken(): { token: string; prefix: string } {
  const token = TOKEN_PREFIX + createSecret();
  return { token, prefix: token.slice(0, SHOWN) };
}

/** SHA-256, hex: enough for secrets of 256 random bits. */
export function digestSecret(secret: string): string {
  return createHash("sha256").update(secret).digest("hex");
}
