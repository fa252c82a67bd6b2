/** From an error to one RFC 9457 problem document. */
import { ZodError } from "zod";
import type { Problem } from "../api/common";
import { AppError } from "../errors/app-error";
import { ERROR_TABLE } from "../errors/error-table";

export interface ProblemPlace {
  /** Path of the request. */
  instance: string;
  requestId: string;
}

/** Whether the error is ours to explain; others are logged and hidden behind a fixed sentence. */
export function isExplained(error: unknown): boolean {
  return error instanceof AppError && error.code !== "internal";
}

/** Unknown errors become a 500 with a fixed sentence; nothing of the original leaves the server. */
export function toProblem(error: unknown, place: ProblemPlace): Problem {
  const known =
    error instanceof AppError
      ? error
      : new AppError(
          "internal",
          `Something went wrong on our side. Try again; if it happens again, quote report ${place.requestId}.`,
        );
  const { fields, ...details } = known.details;
  const shown = known.status < 500 || known.retryable ? details : {};
  return {
    type: `urn:tidemark:problem:${known.code}`,
    title: ERROR_TABLE[known.code].title,
    status: known.status,
    detail: known.message,
    instance: place.instance,
    code: known.code,
    requestId: place.requestId,
    ...(Array.isArray(fields) ? { errors: fields as Problem["errors"] } : {}),
    ...(Object.keys(shown).length > 0 ? { details: shown } : {}),
  };
}

/** @returns application/problem+json, never stored by a cache. */
export function toProblemResponse(problem: Problem): Response {
  const headers = new Headers({
    "content-type": "application/problem+json",
    "cache-control": "no-store",
    "x-request-id": problem.requestId,
  });
  if (problem.status === 401) headers.set("www-authenticate", 'Bearer realm="tidemark"');
  const wait = problem.details?.["retryAfterS"];
  if (typeof wait === "number") headers.set("retry-after", String(Math.ceil(wait)));
  return new Response(JSON.stringify(problem), { status: problem.status, headers });
}

/** Input that does not fit its schema, fault by fault. */
export function toInputError(error: unknown): unknown {
  if (!(error instanceof ZodError)) return error;
  const fields = error.issues.map((issue) => ({
    path: issue.path.map(String).join("."),
    message: issue.message,
  }));
  const first = fields[0];
  const where = first === undefined || first.path === "" ? "" : `${first.path}: `;
  const more = fields.length > 1 ? ` (and ${fields.length - 1} more)` : "";
  return new AppError("request.invalid", `${where}${first?.message ?? "not valid"}${more}`, {
    details: { fields },
    cause: error,
  });
}
