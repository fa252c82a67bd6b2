/** A snapshot as the bytes that are kept, and the digest that names them. */
import { snapshotSchema, type Snapshot } from "./snapshot-schema";

/**
 * @param snapshot any order of keys.
 * @returns compact JSON in the order of the schema.
 * @throws ZodError where the snapshot does not fit its schema (NaN, for one).
 */
export function toSnapshotText(snapshot: Snapshot): string {
  return JSON.stringify(snapshotSchema.parse(snapshot));
}

export { digestText } from "../review/digest-decisions";

/** The inverse of toSnapshotText. @throws ZodError */
export const parseSnapshotText = (text: string): Snapshot => snapshotSchema.parse(JSON.parse(text));
