/** What stands published, for holding newer engines against it. */
import { snapshotSchema, type Snapshot } from "../../lib/publication/snapshot-schema";
import type { Trx } from "../client";

export interface LivePublication {
  seriesId: string;
  number: number;
  name: string;
  snapshot: Snapshot;
}

/** Newest first. */
export async function listLivePublications(trx: Trx, labId: string): Promise<LivePublication[]> {
  const rows = await trx
    .selectFrom("publications as p")
    .innerJoin("series as s", (join) =>
      join.onRef("s.lab_id", "=", "p.lab_id").onRef("s.id", "=", "p.series_id"),
    )
    .select(["p.series_id", "s.number", "s.loudspeaker_name", "p.snapshot"])
    .where("p.lab_id", "=", labId)
    .where("p.state", "=", "live")
    .orderBy("p.published_at", "desc")
    .execute();
  return rows.map((row) => ({
    seriesId: row.series_id,
    number: row.number,
    name: row.loudspeaker_name,
    snapshot: snapshotSchema.parse(JSON.parse(row.snapshot)),
  }));
}
