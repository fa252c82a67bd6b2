/** What stands at an address of a publication: kept for a moment, forgotten with every change. */
import { inLab } from "../../../db/in-lab";
import { getLab } from "../../../db/queries/labs";
import {
  findPublication,
  listPublications,
  type PublicationRow,
} from "../../../db/queries/publications";
import { listenToChanges } from "../changes";
import { getDatabase } from "../database";
import { keepUntilForgotten, type Kept } from "./keep-until-forgotten";
import { takeTurns } from "./take-turns";

export interface PublicationAddress {
  lab: string;
  slug: string;
  /** null: the newest. */
  revision: number | null;
}

/** What is known of a revision besides its snapshot. */
export interface RevisionRows {
  row: PublicationRow;
  /** All that a reader may know of, newest first. */
  revisions: PublicationRow[];
  timeZone: string;
}

/**
 * The end of an embargo and changes that nobody could tell of show after so long at the latest.
 * What this server does itself shows at once, what another process does with its word of it.
 */
const KEPT_MS = 1000;
const MOST_KEPT = 1000;

/** One for the process: every route is a bundle of its own. */
const holder = globalThis as typeof globalThis & { tidemarkRevisions?: Kept<RevisionRows> };

function hold(): Kept<RevisionRows> {
  if (holder.tidemarkRevisions !== undefined) return holder.tidemarkRevisions;
  const look = takeTurns((key) => findStanding(JSON.parse(key) as PublicationAddress));
  const kept = keepUntilForgotten(look, { keptMs: KEPT_MS, most: MOST_KEPT });
  holder.tidemarkRevisions = kept;
  listenToChanges(() => kept.forget());
  return kept;
}

/** @returns null where nothing is published here */
export const findRevision = (address: PublicationAddress): Promise<RevisionRows | null> =>
  hold().ask(JSON.stringify(address));

/** After the transaction of whatever changes a publication. */
export const forgetRevisions = (): void => hold().forget();

async function findStanding(address: PublicationAddress): Promise<RevisionRows | null> {
  const found = await findPublication(getDatabase(), address);
  if (found === null) return null;
  const { labId, publicationId } = found;
  return inLab(getDatabase(), { labId, accountId: null }, async (trx) => {
    const lab = await getLab(trx, labId);
    const series = await trx
      .selectFrom("publications")
      .select("series_id")
      .where("lab_id", "=", labId)
      .where("id", "=", publicationId)
      .executeTakeFirstOrThrow();
    const all = await listPublications(trx, labId, series.series_id);
    const now = new Date();
    const revisions = all.filter((one) => one.embargo_until === null || one.embargo_until <= now);
    const row = revisions.find((one) => one.id === publicationId);
    return row === undefined ? null : { row, revisions, timeZone: lab.time_zone };
  });
}
