import { AnalysisError, AppError } from "../../lib/errors/app-error";
import { ERROR_TABLE, type ErrorCode } from "../../lib/errors/error-table";
import type { SentError } from "./messages";

export function toSentError(error: unknown): SentError {
  const known = error instanceof AppError ? error : null;
  return {
    code: known?.code ?? null,
    message: error instanceof Error ? error.message : String(error),
    details: known?.details ?? {},
    file: known?.file ?? null,
    stack: error instanceof Error ? (error.stack ?? null) : null,
  };
}

/** The same code, file and figures on the other side. */
export function fromSentError(sent: SentError): Error {
  if (sent.code !== null && isCode(sent.code)) {
    return new AnalysisError(sent.code, sent.message, {
      details: sent.details,
      ...(sent.file === null ? {} : { file: sent.file }),
    });
  }
  const error = new Error(sent.message);
  if (sent.stack !== null) error.stack = sent.stack;
  return error;
}

const isCode = (code: string): code is ErrorCode => Object.hasOwn(ERROR_TABLE, code);
