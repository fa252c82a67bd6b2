/**
 * A result as text, and as the parts that it is kept in. Whoever prints a result goes through
 * here, so that the command and the API give the same bytes.
 */
import { resultSchema, type Band, type Result, type ResultRun } from "./result-schema";

/** A result without its runs and bands, which are kept row by row. */
export type ResultHead = Omit<Result, "runs" | "bands">;

/**
 * @param result any order of keys.
 * @returns compact JSON in the order of the schema, with one line end.
 * @throws ZodError where the result does not fit its schema (NaN, for one).
 */
export function toResultText(result: Result): string {
  return `${JSON.stringify(resultSchema.parse(result))}\n`;
}

export function toResultParts(result: Result): {
  head: ResultHead;
  runs: ResultRun[];
  bands: Band[];
} {
  const { runs, bands, ...head } = result;
  return { head, runs, bands };
}

/** The inverse of toResultParts. */
export function composeResult(head: ResultHead, runs: ResultRun[], bands: Band[]): Result {
  return { ...head, runs, bands };
}
