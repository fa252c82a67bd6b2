/** How often a password may be tried: per address and per network address, counted in PostgreSQL. */
import type { Pool } from "pg";
import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { digestSecret } from "../../lib/account/secrets";
import { AppError } from "../../lib/errors/app-error";

/** Tries per address, and per network address, in a quarter of an hour. */
export const TRIES_PER_ADDRESS = 8;
export const TRIES_PER_IP = 60;
const WINDOW_S = 15 * 60;

export interface Attempts {
  /**
   * Counts one try before the password is looked at.
   *
   * @returns tries that are left for the address after this one.
   * @throws AppError "auth.rate-limited" with details.retryAfterS; "database.unavailable" where it
   *   cannot be counted: nobody gets in uncounted.
   */
  count: (email: string, ip: string) => Promise<number>;
  /** The password was right: the address starts anew, the network address gets its try back. */
  forgive: (email: string, ip: string) => Promise<void>;
}

export function createAttempts(pool: Pool): Attempts {
  const limiter = (keyPrefix: string, points: number): RateLimiterPostgres =>
    new RateLimiterPostgres({
      storeClient: pool,
      storeType: "pool",
      tableName: "rate_limits",
      tableCreated: true,
      keyPrefix,
      points,
      duration: WINDOW_S,
    });
  const byAddress = limiter("address", TRIES_PER_ADDRESS);
  const byIp = limiter("ip", TRIES_PER_IP);
  return {
    async count(email, ip) {
      await consume(byIp, toKey(ip));
      return (await consume(byAddress, toKey(email))).remainingPoints;
    },
    async forgive(email, ip) {
      await byAddress.delete(toKey(email));
      await byIp.reward(toKey(ip));
    },
  };
}

async function consume(limiter: RateLimiterPostgres, key: string): Promise<RateLimiterRes> {
  try {
    return await limiter.consume(key);
  } catch (refusal) {
    if (!(refusal instanceof RateLimiterRes)) {
      throw new AppError(
        "database.unavailable",
        "The database cannot be reached at the moment. Try again in a minute.",
        { cause: refusal },
      );
    }
    const retryAfterS = Math.ceil(refusal.msBeforeNext / 1000);
    throw new AppError(
      "auth.rate-limited",
      `Too many attempts. Try again in ${Math.max(1, Math.ceil(retryAfterS / 60))} minutes.`,
      { details: { retryAfterS } },
    );
  }
}

/** Neither addresses nor network addresses stand in the table. */
const toKey = (text: string): string => digestSecret(text.trim().toLowerCase()).slice(0, 32);
