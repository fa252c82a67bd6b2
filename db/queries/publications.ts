/** Publications of a series: revisions, newest first; what a reader's address leads to. */
import { sql, type Selectable } from "kysely";
import { isUniqueViolation } from "../database-error";
import { AppError } from "../../lib/errors/app-error";
import type { Db, Trx } from "../client";
import type { PublicationsTable } from "../schema/publications";

export type PublicationRow = Omit<Selectable<PublicationsTable>, "snapshot"> & {
  publishedByName: string | null;
};

/** Newest first, without the snapshots. */
export async function listPublications(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<PublicationRow[]> {
  return publicationsOf(trx, labId)
    .where("p.series_id", "=", seriesId)
    .orderBy("p.revision", "desc")
    .execute();
}

/** @throws AppError "not-found" */
export async function getPublication(
  trx: Trx,
  labId: string,
  publicationId: string,
): Promise<PublicationRow> {
  const row = await publicationsOf(trx, labId).where("p.id", "=", publicationId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such publication.");
  return row;
}

/** The kept bytes. @throws AppError "not-found" */
export async function getSnapshotText(
  trx: Trx,
  labId: string,
  publicationId: string,
): Promise<string> {
  const row = await trx
    .selectFrom("publications")
    .select("snapshot")
    .where("lab_id", "=", labId)
    .where("id", "=", publicationId)
    .executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such publication.");
  return row.snapshot;
}

/** The kept bytes of several. */
export async function listSnapshots(
  trx: Trx,
  labId: string,
  publicationIds: readonly string[],
): Promise<{ id: string; slug: string; snapshot: string }[]> {
  return trx
    .selectFrom("publications")
    .select(["id", "slug", "snapshot"])
    .where("lab_id", "=", labId)
    .where("id", "in", publicationIds)
    .execute();
}

/** Whether another series of the lab has the address. */
export async function isSlugTaken(
  trx: Trx,
  labId: string,
  slug: string,
  exceptSeriesId: string,
): Promise<boolean> {
  const row = await trx
    .selectFrom("publications")
    .select("id")
    .where("lab_id", "=", labId)
    .where("slug", "=", slug)
    .where("series_id", "!=", exceptSeriesId)
    .executeTakeFirst();
  return row !== undefined;
}

export interface NewPublication {
  seriesId: string;
  signOffId: string;
  slug: string;
  revision: number;
  snapshot: string;
  digest: string;
  embargoUntil: Date | null;
  changeNote: string | null;
  evidencePublic: boolean;
  publishedBy: string;
  publishedAt: Date;
}

/** The one that was live becomes `replaced`. @throws AppError "conflict.exists" for a taken address */
export async function insertPublication(
  trx: Trx,
  labId: string,
  publication: NewPublication,
): Promise<string> {
  await trx
    .updateTable("publications")
    .set({ state: "replaced", replaced_at: publication.publishedAt })
    .where("lab_id", "=", labId)
    .where("series_id", "=", publication.seriesId)
    .where("state", "=", "live")
    .execute();
  try {
    const row = await trx
      .insertInto("publications")
      .values({
        lab_id: labId,
        series_id: publication.seriesId,
        sign_off_id: publication.signOffId,
        slug: publication.slug,
        revision: publication.revision,
        snapshot: publication.snapshot,
        digest: publication.digest,
        embargo_until: publication.embargoUntil,
        change_note: publication.changeNote,
        evidence_public: publication.evidencePublic,
        published_by: publication.publishedBy,
        published_at: publication.publishedAt,
      })
      .returning("id")
      .executeTakeFirstOrThrow();
    return row.id;
  } catch (error) {
    if (!isUniqueViolation(error, "publications_lab_id_slug_revision_key")) throw error;
    throw slugTaken(publication.slug, error);
  }
}

export const slugTaken = (slug: string, cause?: unknown): AppError =>
  new AppError(
    "conflict.exists",
    `Another series of this lab is published as "${slug}". Choose another address.`,
    { details: { slug }, cause },
  );

/** @returns false where it is not live (any more). */
export async function withdraw(
  trx: Trx,
  labId: string,
  publicationId: string,
  by: { accountId: string; reason: string },
): Promise<boolean> {
  const row = await trx
    .updateTable("publications")
    .set({
      state: "withdrawn",
      withdrawn_by: by.accountId,
      withdrawn_at: new Date(),
      withdraw_reason: by.reason,
    })
    .where("lab_id", "=", labId)
    .where("id", "=", publicationId)
    .where("state", "=", "live")
    .returning("id")
    .executeTakeFirst();
  return row !== undefined;
}

/** Ids behind a reader's address; what is under embargo is not there. @param revision null: the newest */
export async function findPublication(
  db: Db,
  address: { lab: string; slug: string; revision: number | null },
): Promise<{ labId: string; publicationId: string } | null> {
  const { rows } = await sql<{ lab_id: string; publication_id: string }>`
    select lab_id, publication_id
    from find_publication(${address.lab}, ${address.slug}, ${address.revision}::integer)`.execute(
    db,
  );
  const row = rows[0];
  return row === undefined ? null : { labId: row.lab_id, publicationId: row.publication_id };
}

/** All that are live and out of embargo, over all labs; newest first. */
export async function listPublishedIds(
  db: Db,
): Promise<{ labId: string; publicationId: string }[]> {
  const { rows } = await sql<{ lab_id: string; publication_id: string }>`
    select lab_id, publication_id from list_published()`.execute(db);
  return rows.map((row) => ({ labId: row.lab_id, publicationId: row.publication_id }));
}

function publicationsOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("publications as p")
    .leftJoin("accounts as a", "a.id", "p.published_by")
    .select([
      "p.id",
      "p.lab_id",
      "p.series_id",
      "p.sign_off_id",
      "p.slug",
      "p.revision",
      "p.digest",
      "p.state",
      "p.embargo_until",
      "p.change_note",
      "p.evidence_public",
      "p.published_by",
      "p.published_at",
      "p.replaced_at",
      "p.withdrawn_by",
      "p.withdrawn_at",
      "p.withdraw_reason",
      "a.name as publishedByName",
    ])
    .where("p.lab_id", "=", labId);
}
