/**
 * The one error family of the project. `code` is dotted kebab-case and stands in ERROR_TABLE,
 * which says what it means over HTTP and to a worker; `message` is written for people.
 */
import { ERROR_TABLE, type ErrorCode } from "./error-table";

export interface AppErrorOptions {
  /** Figures and names behind the message; JSON-safe. */
  details?: Record<string, unknown>;
  /** The recording or table at fault, as named by its owner. */
  file?: string;
  cause?: unknown;
}

export class AppError extends Error {
  readonly code: ErrorCode;
  readonly details: Record<string, unknown>;
  readonly file: string | undefined;

  constructor(code: ErrorCode, message: string, options: AppErrorOptions = {}) {
    super(message, options.cause === undefined ? undefined : { cause: options.cause });
    this.name = new.target.name;
    this.code = code;
    this.details = options.details ?? {};
    this.file = options.file;
  }

  get status(): number {
    return ERROR_TABLE[this.code].status;
  }

  get retryable(): boolean {
    return ERROR_TABLE[this.code].retryable;
  }
}

/** The input to the engine is at fault, or the engine cannot compute what was asked. */
export class AnalysisError extends AppError {}

/** A file that cannot be read as what it claims to be. */
export class FileError extends AppError {}
