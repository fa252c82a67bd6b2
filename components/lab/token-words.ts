/** What a token may do now, in words. */
import type { Token } from "@/lib/api/tokens";
import { ROLES, tokenRoles, type Role } from "@/lib/roles/roles";

export type TokenState = "in use" | "expired" | "revoked";

export function toTokenState(
  token: Pick<Token, "expires_at" | "revoked_at">,
  now: Date,
): TokenState {
  if (token.revoked_at !== null) return "revoked";
  return token.expires_at !== null && new Date(token.expires_at) <= now ? "expired" : "in use";
}

export interface TokenRights {
  /** What it may do: given, and still held by its owner. */
  counts: Role[];
  /** Given, but no longer held by its owner. */
  asleep: Role[];
}

/** @param ownerNow roles of the owner now; empty for somebody who left the lab. */
export function toTokenRights(given: readonly Role[], ownerNow: readonly Role[]): TokenRights {
  const counts = tokenRoles(given, ownerNow);
  return {
    counts,
    asleep: ROLES.filter((role) => given.includes(role) && !counts.includes(role)),
  };
}

/** Choices of how long a new token is good, days; null: until it is revoked. */
export const LIFETIMES: readonly (readonly [days: number | null, words: string])[] = [
  [30, "30 days"],
  [90, "90 days"],
  [365, "a year"],
  [null, "until it is revoked"],
];
