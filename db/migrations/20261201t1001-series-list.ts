/** The list sorts by state in the order of a series' life; the store asks which files nobody keeps. */
import { sql, type Kysely } from "kysely";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `alter table series add column state_order smallint not null generated always as (case state
         when 'planned' then 0 when 'capturing' then 1 when 'analysing' then 2
         when 'analysis failed' then 3 when 'in review' then 4 else 5 end) stored;
       create index series_by_state_order on series (lab_id, state_order, number) where archived_at is null;

       -- Files are stored by digest for all labs at once; which of these does no lab hold?
       create policy lookup on recordings for select to tidemark_owner using (true);
       create function find_unheld_digests(wanted text[]) returns table (digest text)
         language sql stable security definer set search_path = public, pg_temp as
         $$ select w from unnest(wanted) w where not exists (select from recordings r where r.digest = w) $$;
       revoke all on function find_unheld_digests(text[]) from public;
       grant execute on function find_unheld_digests(text[]) to tidemark_app;
       create index recordings_by_digest on recordings (digest);`,
    )
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `drop index recordings_by_digest;
       drop function find_unheld_digests(text[]);
       drop policy lookup on recordings;
       alter table series drop column state_order;`,
    )
    .execute(db);
}
