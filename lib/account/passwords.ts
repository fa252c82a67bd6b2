/** Passwords: argon2id by the parameters of OWASP's cheat sheet (19 MiB, 2 passes). */
import { hash, verify } from "@node-rs/argon2";
import { AppError } from "../errors/app-error";

export const PASSWORD_MIN = 12;
export const PASSWORD_MAX = 200;

const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** @throws AppError "password.weak" */
export function checkPassword(password: string): void {
  if (password.length < PASSWORD_MIN || password.length > PASSWORD_MAX) {
    throw new AppError(
      "password.weak",
      `A password has ${PASSWORD_MIN} to ${PASSWORD_MAX} characters; this one has ${password.length}.`,
    );
  }
}

/** @throws AppError "password.weak" */
export async function hashPassword(password: string): Promise<string> {
  checkPassword(password);
  return hash(password, COST);
}

/**
 * @param stored null where there is no such account: takes as long, so that nobody learns which
 *   addresses have one.
 */
export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
  const tried = password.slice(0, PASSWORD_MAX + 1);
  if (stored === null) {
    await hash(tried, COST);
    return false;
  }
  return verify(stored, tried);
}
