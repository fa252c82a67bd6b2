/**
 * What the way of a recording needs besides: the place that a waiting file is meant for, and the
 * run that an upload became. A finished upload goes with its day too.
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

       ${expiredUploads("u.expires_at < now()")}`,
    )
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `${expiredUploads("u.finished_at is null and u.expires_at < now()")}
       drop index uploads_by_expiry;
       create index uploads_by_expiry on uploads (expires_at) where finished_at is null;
       alter table uploads drop column run_id;
       alter table runs drop column wanted_slot;`,
    )
    .execute(db);
}
