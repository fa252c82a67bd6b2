/** Tells listening web servers that something of a series changed; sent when the transaction commits. */
import { sql } from "kysely";
import { z } from "zod";
import type { Trx } from "../client";

export const CHANGES_CHANNEL = "tidemark_changes";

export const changeSchema = z.object({
  labId: z.string(),
  seriesId: z.string(),
  analysisId: z.string().optional(),
  runId: z.string().optional(),
});
/** Ids only: whoever listens reads the rows in its own lab transaction. */
export type Change = z.infer<typeof changeSchema>;

export async function notifyChange(trx: Trx, change: Change): Promise<void> {
  await sql`select pg_notify(${CHANGES_CHANNEL}, ${JSON.stringify(change)})`.execute(trx);
}
