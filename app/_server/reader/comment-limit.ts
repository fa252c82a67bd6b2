/** How many comments may come through one link, and from one network address, in an hour. */
import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { digestSecret } from "../../../lib/account/secrets";
import { getPool } from "../database";

const PER_LINK = 12;
const PER_IP = 30;
const WINDOW_S = 3600;

let limiters: { link: RateLimiterPostgres; ip: RateLimiterPostgres } | undefined;

function hold(): NonNullable<typeof limiters> {
  const make = (keyPrefix: string, points: number): RateLimiterPostgres =>
    new RateLimiterPostgres({
      storeClient: getPool(),
      storeType: "pool",
      tableName: "rate_limits",
      tableCreated: true,
      keyPrefix,
      points,
      duration: WINDOW_S,
    });
  limiters ??= { link: make("maker-link", PER_LINK), ip: make("maker-ip", PER_IP) };
  return limiters;
}

/** @returns null where one more may come, else what to tell. */
export async function countComment(previewId: string, ip: string): Promise<string | null> {
  try {
    const { link, ip: byIp } = hold();
    await byIp.consume(digestSecret(ip).slice(0, 32));
    await link.consume(previewId);
    return null;
  } catch (refusal) {
    if (!(refusal instanceof RateLimiterRes)) throw refusal;
    const minutes = Math.max(1, Math.ceil(refusal.msBeforeNext / 60_000));
    return `Too many comments in a short time. Your words are still in the form: try again in ${minutes} minutes.`;
  }
}
