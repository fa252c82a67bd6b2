/**
 * A result as text, and as the parts that it is kept in. Whoever prints a result goes through
 * here, so that the command and the API give the same bytes.
 */
import * as z from "zod";
import {
  QUALITIES,
  harmonicSchema,
  resultRunSchema,
  resultSchema,
  type Band,
  type Quality,
  type Result,
  type ResultRun,
} from "./result-schema";

/** A result without its runs and bands, which are kept row by row. */
export type ResultHead = Omit<Result, "runs" | "bands">;

// Curves are most of a result and hold no keys that a schema would put in order: a loop each will do.
const isValue = (value: unknown): boolean => value === null || Number.isFinite(value);
const isQuality = (value: unknown): boolean =>
  value === null || QUALITIES.some((quality) => quality === value);
const listOf = <T>(holds: (value: unknown) => boolean) =>
  z.custom<T[]>((list) => Array.isArray(list) && list.every(holds));
const curve = listOf<number | null>(isValue);
const qualities = listOf<Quality | null>(isQuality);

/** The schema of a result with plain loops for its curves: the same values, the same order of keys. */
const printedSchema = resultSchema.extend({
  runs: z.array(
    resultRunSchema.extend({
      spl_dB: curve,
      floor_dB: curve,
      harmonics: z.array(
        harmonicSchema.extend({ spl_dB: curve, floor_dB: curve, quality: qualities }),
      ),
      thd_percent: curve,
      thd_quality: qualities,
      thd_orders: listOf<string>((value) => typeof value === "string"),
    }),
  ),
});

/**
 * @param result any order of keys.
 * @returns compact JSON in the order of the schema, with one line end.
 * @throws ZodError where the result does not fit its schema (NaN, for one).
 */
export function toResultText(result: Result): string {
  return `${JSON.stringify(printedSchema.parse(result))}\n`;
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
