/**
 * What keeping needs: a recording whose bytes were removed keeps its row and digest, an analysis
 * knows the source that computed it, and the worker finds the labs that set a retention.
 */
import { sql, type Kysely } from "kysely";

const unheldDigests = (held: string): string =>
  `create or replace function find_unheld_digests(wanted text[]) returns table (digest text)
     language sql stable security definer set search_path = public, pg_temp as
     $$ select w from unnest(wanted) w where not exists (select from recordings r where ${held}) $$;`;

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `alter table recordings add column removed_at timestamptz;
       grant update (removed_at) on recordings to tidemark_app;
       alter table analyses add column source_commit text;

       ${unheldDigests("r.digest = w and r.removed_at is null")}

       create function find_labs_with_retention() returns table (lab_id uuid)
         language sql stable security definer set search_path = public, pg_temp as
         $$ select l.id from labs l where jsonb_typeof(l.settings -> 'retention_days') = 'number' $$;
       revoke all on function find_labs_with_retention() from public;
       grant execute on function find_labs_with_retention() to tidemark_app;`,
    )
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `drop function find_labs_with_retention();
       ${unheldDigests("r.digest = w")}
       alter table analyses drop column source_commit;
       alter table recordings drop column removed_at;`,
    )
    .execute(db);
}
