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
  const windowS = WINDOW_S;
  const byAddress = createLimiter(pool, { name: "address", points: TRIES_PER_ADDRESS, windowS });
  const byIp = createLimiter(pool, { name: "ip", points: TRIES_PER_IP, windowS });
  return {
    async count(email, ip) {
      await byIp.count(ip);
      return byAddress.count(email);
    },
    async forgive(email, ip) {
      await byAddress.forget(email);
      await byIp.giveBack(ip);
    },
  };
}

/** One count by whatever text; the text itself is stored nowhere. */
export function createLimiter(
  pool: Pool,
  { name, points, windowS }: { name: string; points: number; windowS: number },
) {
  const limiter = new RateLimiterPostgres({
    storeClient: pool,
    storeType: "pool",
    tableName: "rate_limits",
    tableCreated: true,
    keyPrefix: name,
    points,
    duration: windowS,
  });
  return {
    /** @returns points that are left. @throws as Attempts.count does */
    count: async (text: string): Promise<number> =>
      (await consume(limiter, toKey(text))).remainingPoints,
    forget: async (text: string): Promise<void> => {
      await limiter.delete(toKey(text));
    },
    giveBack: async (text: string): Promise<void> => {
      await limiter.reward(toKey(text));
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
