/** Publications: immutable snapshots in revisions, maker's previews and comments. */
import { sql, type Kysely } from "kysely";
import { protectByLab } from "./row-security";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `create table publications (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         sign_off_id uuid not null,
         -- Second part of the address /t/<lab>/<series>; the same for all revisions of a series.
         slug text not null check (slug ~ '^[a-z0-9]+(-[a-z0-9]+)*$'),
         revision integer not null check (revision > 0),
         -- Canonical JSON, to the byte, and its SHA-256. Never changed.
         snapshot text not null,
         digest char(64) not null,
         state text not null default 'live' check (state in ('live', 'replaced', 'withdrawn')),
         embargo_until timestamptz,
         change_note text,
         evidence_public boolean not null default false,
         published_by uuid not null,
         published_at timestamptz not null default now(),
         replaced_at timestamptz,
         withdrawn_by uuid,
         withdrawn_at timestamptz,
         withdraw_reason text,
         unique (lab_id, id),
         unique (series_id, revision),
         unique (lab_id, slug, revision),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, sign_off_id) references sign_offs (lab_id, id),
         foreign key (lab_id, published_by) references memberships (lab_id, account_id),
         foreign key (lab_id, withdrawn_by) references memberships (lab_id, account_id),
         check (revision = 1 or change_note is not null),
         check ((state = 'withdrawn') = (withdraw_reason is not null))
       );
       create unique index publications_live on publications (series_id) where state = 'live';
       create index publications_by_time on publications (lab_id, published_at desc);

       create function keep_snapshot() returns trigger language plpgsql
         set search_path = public, pg_temp as $$
       begin
         if new.snapshot <> old.snapshot or new.digest <> old.digest or new.revision <> old.revision
            or new.slug <> old.slug or new.series_id <> old.series_id then
           raise exception 'a published snapshot is never changed' using errcode = '23514';
         end if;
         return new;
       end $$;
       create trigger keep_snapshot before update on publications
         for each row execute function keep_snapshot();

       create table previews (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         sign_off_id uuid not null,
         token_hash char(64) not null unique,
         for_whom text not null,
         -- The page as it would be, kept so that the maker comments on something that stands still.
         snapshot text not null,
         created_by uuid not null,
         created_at timestamptz not null default now(),
         expires_at timestamptz not null,
         revoked_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, sign_off_id) references sign_offs (lab_id, id),
         foreign key (lab_id, created_by) references memberships (lab_id, account_id)
       );

       create table maker_comments (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         preview_id uuid not null,
         name text not null,
         email text not null,
         words text not null check (length(words) between 1 and 5000),
         written_at timestamptz not null default now(),
         answer text,
         answered_by uuid,
         answered_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, preview_id) references previews (lab_id, id),
         foreign key (lab_id, answered_by) references memberships (lab_id, account_id)
       );`,
    )
    .execute(db);
  await protectByLab(db, "publications", ["select", "insert", "update"]);
  await protectByLab(db, "previews", ["select", "insert", "update"]);
  await protectByLab(db, "maker_comments", ["select", "insert", "update"]);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `drop table maker_comments, previews, publications;
       drop function keep_snapshot();`,
    )
    .execute(db);
}
