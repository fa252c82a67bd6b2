/** All published tests of all labs: who is live is asked at every request, what they say is read once. */
import { inLab } from "../../../db/in-lab";
import { getSnapshotText, listPublishedIds, listSnapshots } from "../../../db/queries/publications";
import { parseSnapshotText } from "../../../lib/publication/canonical";
import type { Snapshot } from "../../../lib/publication/snapshot-schema";
import { toPublishedTest, type PublishedTest } from "../../../lib/reader/published-list";
import { getDatabase } from "../database";
import { takeTurns } from "./take-turns";

/** A snapshot never changes: what was read once stays right. */
const known = new Map<string, KnownTest>();

interface KnownTest extends PublishedTest {
  labId: string;
  publicationId: string;
}

/** Newest first. */
export const listPublishedTests = (): Promise<KnownTest[]> => look("all");

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
      known.set(row.id, {
        ...toPublishedTest(snapshot, row.slug),
        labId,
        publicationId: row.id,
      });
    }
  }
  const live = new Set(ids.map((one) => one.publicationId));
  for (const id of known.keys()) if (!live.has(id)) known.delete(id);
  return ids.flatMap(({ publicationId }) => known.get(publicationId) ?? []);
});

/** The snapshots of tests that are live, by publication id. */
export async function readSnapshots(
  tests: readonly Pick<KnownTest, "labId" | "publicationId">[],
): Promise<Map<string, Snapshot>> {
  const found = new Map<string, Snapshot>();
  for (const { labId, publicationId } of tests) {
    const text = await inLab(getDatabase(), { labId, accountId: null }, (trx) =>
      getSnapshotText(trx, labId, publicationId),
    );
    found.set(publicationId, parseSnapshotText(text));
  }
  return found;
}
