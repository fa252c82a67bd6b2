/**
 * What the way of a recording needs besides: the place that a waiting file is meant for, the run
 * that an upload became, and what the sweep of the storage folder asks.
 */
import { sql, type Kysely } from "kysely";

const expiredUploads = (condition: string): string =>
  `create or replace function find_expired_uploads() returns table (lab_id uuid, upload_id text)
     language sql stable security definer set search_path = public, pg_temp as $$
     select u.lab_id, u.id from uploads u where ${condition} order by u.expires_at limit 500 $$;`;

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `alter table runs add column wanted_slot text;

       alter table uploads add column run_id uuid;
       alter table uploads add foreign key (lab_id, run_id)
         references runs (lab_id, id) on delete set null (run_id);
       create index uploads_by_run on uploads (lab_id, run_id);
       drop index uploads_by_expiry;
       create index uploads_by_expiry on uploads (expires_at);

       -- Recordings lie by digest for all labs together: the sweep of orphans asks across labs,
       -- and learns of a digest only that nobody names it.
       create policy lookup on recordings for select to tidemark_owner using (true);
       create index recordings_by_digest on recordings (digest);
       create function find_unnamed_digests(candidates text[]) returns table (digest text)
         language sql stable security definer set search_path = public, pg_temp as $$
         select c.digest from unnest(candidates) as c (digest)
         where not exists (select from recordings r where r.digest = c.digest) $$;
       revoke all on function find_unnamed_digests(text[]) from public;
       grant execute on function find_unnamed_digests(text[]) to tidemark_app;

       ${expiredUploads("u.expires_at < now()")}`,
    )
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `${expiredUploads("u.finished_at is null and u.expires_at < now()")}
       drop function find_unnamed_digests(text[]);
       drop index recordings_by_digest;
       drop policy lookup on recordings;
       drop index uploads_by_expiry;
       create index uploads_by_expiry on uploads (expires_at) where finished_at is null;
       alter table uploads drop column run_id;
       alter table runs drop column wanted_slot;`,
    )
    .execute(db);
}
