/** What a refusal by PostgreSQL means to the rest of the project. */
import { AppError } from "../lib/errors/app-error";

/** Connection lost or refused, server starting, stopping or full. */
const UNREACHABLE = new Set([
  "ECONNREFUSED",
  "ECONNRESET",
  "EPIPE",
  "ETIMEDOUT",
  "57P01",
  "57P02",
  "57P03",
  "53300",
  "08000",
  "08003",
  "08006",
]);

/** @returns an AppError where the cause is known, else the error itself. */
export function toDatabaseError(error: unknown): unknown {
  if (!(error instanceof Error) || error instanceof AppError) return error;
  const code = textOf(error, "code");
  if (code === "23514" && textOf(error, "constraint") === "last_admin") {
    return new AppError(
      "member.last-admin",
      "This is the lab's last admin. Make somebody else an admin first.",
      { cause: error },
    );
  }
  if ((code !== undefined && UNREACHABLE.has(code)) || isLostConnection(error)) {
    return new AppError(
      "database.unavailable",
      "The database cannot be reached at the moment. Try again in a minute; nothing was changed.",
      { cause: error },
    );
  }
  return error;
}

/** Whether the error is a unique violation, of one constraint or index where named. */
export function isUniqueViolation(error: unknown, constraint?: string): boolean {
  if (!(error instanceof Error)) return false;
  if (textOf(error, "code") !== "23505") return false;
  return constraint === undefined || textOf(error, "constraint") === constraint;
}

const isLostConnection = (error: Error): boolean =>
  /^(timeout exceeded when trying to connect|Connection terminated|Client has encountered a connection error)/.test(
    error.message,
  );

/** A field that pg or Node puts on its errors. */
function textOf(error: Error, field: "code" | "constraint"): string | undefined {
  const value: unknown = Reflect.get(error, field);
  return typeof value === "string" ? value : undefined;
}
