/** Everything that belongs to a lab, table by table, in pages: for its export. */
import { sql } from "kysely";
import type { Trx } from "../client";

interface ExportedTable {
  /** Columns that tell one row from the next, in the order of the pages. */
  key: readonly [string, ...string[]];
  /** Secrets and their digests stay here. */
  without?: readonly string[];
}

/** Tables of a lab that leave with it. */
export const EXPORTED_TABLES = {
  loudspeakers: { key: ["id"] },
  series: { key: ["id"] },
  slot_excuses: { key: ["series_id", "slot"] },
  recordings: { key: ["digest"] },
  runs: { key: ["id"] },
  run_requests: { key: ["id"] },
  analyses: { key: ["id"], without: ["head", "progress"] },
  band_decisions: { key: ["id"] },
  band_comments: { key: ["id"] },
  sign_offs: { key: ["id"] },
  publications: { key: ["id"] },
  previews: { key: ["id"], without: ["token_hash"] },
  maker_comments: { key: ["id"] },
  memberships: { key: ["account_id"] },
  invitations: { key: ["id"], without: ["token_hash"] },
  api_tokens: { key: ["id"], without: ["token_hash"] },
  audit_events: { key: ["id"] },
} as const satisfies Record<string, ExportedTable>;
export type ExportedName = keyof typeof EXPORTED_TABLES;

/** Tables of a lab that stay, each with the reason. */
export const LEFT_OUT_TABLES: Readonly<Record<string, string>> = {
  analysis_runs: "stand in results/",
  analysis_bands: "stand in results/",
  series_counters: "follow from the numbers of the series",
  uploads: "are under way",
  sessions: "belong to the people, not to the lab",
  mails: "hold links that open accounts",
  notice_choices: "belong to the people, not to the lab",
};

const PAGE = 500;

type Row = Record<string, unknown>;

/**
 * The next rows of a table.
 *
 * @param after the last row of the page before; null at first.
 * @returns fewer than asked for at the end; columns that stay are taken out.
 */
export async function readExportPage(
  trx: Trx,
  labId: string,
  name: ExportedName,
  after: Row | null,
): Promise<{ rows: Row[]; last: Row | null }> {
  const table: ExportedTable = EXPORTED_TABLES[name];
  const keys = sql.join(table.key.map((column) => sql.ref(column)));
  const from =
    after === null
      ? sql``
      : sql`and (${keys}) > (${sql.join(table.key.map((column) => sql.val(after[column])))})`;
  const { rows } = await sql<Row>`select * from ${sql.table(name)}
    where lab_id = ${labId} ${from} order by ${keys} limit ${PAGE}`.execute(trx);
  const last = rows.length < PAGE ? null : (rows.at(-1) ?? null);
  const hidden = new Set<string>(table.without ?? []);
  return {
    rows: rows.map((row) =>
      Object.fromEntries(Object.entries(row).filter(([column]) => !hidden.has(column))),
    ),
    last,
  };
}

/** Finished analyses, by series and version: their results are files of their own. */
export async function listFinished(
  trx: Trx,
  labId: string,
): Promise<{ id: string; number: number; version: number }[]> {
  return trx
    .selectFrom("analyses as n")
    .innerJoin("series as s", (join) =>
      join.onRef("s.lab_id", "=", "n.lab_id").onRef("s.id", "=", "n.series_id"),
    )
    .select(["n.id", "s.number", "n.version"])
    .where("n.lab_id", "=", labId)
    .where("n.state", "=", "done")
    .orderBy("s.number")
    .orderBy("n.version")
    .execute();
}

/** Published revisions: their kept bytes are files of their own. */
export async function listRevisions(
  trx: Trx,
  labId: string,
): Promise<{ id: string; slug: string; revision: number }[]> {
  return trx
    .selectFrom("publications")
    .select(["id", "slug", "revision"])
    .where("lab_id", "=", labId)
    .orderBy("slug")
    .orderBy("revision")
    .execute();
}

/** Recordings with what they are, by digest. */
export async function listAllRecordings(
  trx: Trx,
  labId: string,
): Promise<{ digest: string; media: string; removed_at: Date | null }[]> {
  return trx
    .selectFrom("recordings")
    .select(["digest", "media", "removed_at"])
    .where("lab_id", "=", labId)
    .orderBy("digest")
    .execute();
}
