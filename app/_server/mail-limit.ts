/** How often a mail with a link may be asked for: per address and per network address, in an hour. */
import { createLimiter } from "./attempts";
import { getPool } from "./database";

export const LINKS_PER_ADDRESS = 4;
const LINKS_PER_IP = 30;
const WINDOW_S = 3600;

let limits: { address: Limiter; ip: Limiter } | undefined;
type Limiter = ReturnType<typeof createLimiter>;

/** @throws AppError "auth.rate-limited", whether an account has the address or not */
export async function countLinkAsked(email: string, ip: string): Promise<void> {
  limits ??= {
    address: createLimiter(getPool(), {
      name: "link-address",
      points: LINKS_PER_ADDRESS,
      windowS: WINDOW_S,
    }),
    ip: createLimiter(getPool(), { name: "link-ip", points: LINKS_PER_IP, windowS: WINDOW_S }),
  };
  await limits.ip.count(ip);
  await limits.address.count(email);
}
