/** All published tests of all labs: who is live is asked at every request, what they say is read once. */
import { inLab } from "../../../db/in-lab";
import { listPublishedIds, listSnapshots } from "../../../db/queries/publications";
import { toNewestPath } from "../../../lib/publication/addresses";
import { parseSnapshotText } from "../../../lib/publication/canonical";
import { toPublishedTest, type PublishedTest } from "../../../lib/reader/published-list";
import { getDatabase } from "../database";
import { takeTurns } from "./take-turns";

/** A snapshot never changes: what was read once stays right. */
const known = new Map<string, PublishedTest>();

/** Newest first. */
export const listPublishedTests = (): Promise<PublishedTest[]> => look("all");

const look = takeTurns(async () => {
  const ids = await listPublishedIds(getDatabase());
  const missing = new Map<string, string[]>();
  for (const { labId, publicationId } of ids) {
    if (!known.has(publicationId)) {
      missing.set(labId, [...(missing.get(labId) ?? []), publicationId]);
    }
  }
  for (const [labId, wanted] of missing) {
    const rows = await inLab(getDatabase(), { labId, accountId: null }, (trx) =>
      listSnapshots(trx, labId, wanted),
    );
    for (const row of rows) {
      const snapshot = parseSnapshotText(row.snapshot);
      known.set(row.id, toPublishedTest(snapshot, toNewestPath(snapshot.lab.slug, row.slug)));
    }
  }
  const live = new Set(ids.map((one) => one.publicationId));
  for (const id of known.keys()) if (!live.has(id)) known.delete(id);
  return ids.flatMap(({ publicationId }) => known.get(publicationId) ?? []);
});
