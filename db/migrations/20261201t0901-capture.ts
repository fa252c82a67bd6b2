/** Loudspeakers, series with plan and state, recordings in storage, uploads under way, runs. */
import { sql, type Kysely } from "kysely";
import { protectByLab } from "./row-security";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `create table recordings (
         lab_id uuid not null references labs (id),
         digest char(64) not null check (digest ~ '^[0-9a-f]{64}$'),
         bytes bigint not null check (bytes >= 0),
         media text not null,
         created_at timestamptz not null default now(),
         primary key (lab_id, digest)
       );

       create table loudspeakers (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         maker text not null,
         model text not null,
         serial text not null default '',
         kind text not null default '',
         largest_dimension_m double precision check (largest_dimension_m > 0),
         tuning_hz double precision check (tuning_hz > 0),
         photo_digest char(64),
         created_by uuid not null,
         created_at timestamptz not null default now(),
         changed_at timestamptz not null default now(),
         archived_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, created_by) references memberships (lab_id, account_id),
         foreign key (lab_id, photo_digest) references recordings (lab_id, digest)
       );
       create index loudspeakers_by_name on loudspeakers (lab_id, lower(maker || ' ' || model), id);

       -- The last series number given out, per lab.
       create table series_counters (
         lab_id uuid primary key references labs (id),
         last_number integer not null
       );

       create table series (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         number integer not null check (number > 0),
         loudspeaker_id uuid not null,
         -- Kept from the loudspeaker so that the list sorts and searches without a join.
         loudspeaker_name text not null,
         state text not null default 'planned' check (state in
           ('planned', 'capturing', 'analysing', 'analysis failed', 'in review', 'signed off')),
         plan jsonb not null,
         plan_version integer not null default 1,
         list_summary json,
         -- Highest level that the loudspeaker reached, dB, so that the list can sort by it.
         reached_db double precision,
         failure json,
         created_by uuid not null,
         created_at timestamptz not null default now(),
         changed_by uuid,
         changed_at timestamptz not null default now(),
         archived_at timestamptz,
         unique (lab_id, id),
         unique (lab_id, number),
         foreign key (lab_id, loudspeaker_id) references loudspeakers (lab_id, id),
         foreign key (lab_id, created_by) references memberships (lab_id, account_id),
         foreign key (lab_id, changed_by) references memberships (lab_id, account_id)
       );
       create index series_by_change on series (lab_id, changed_at desc, number desc) where archived_at is null;
       create index series_by_state on series (lab_id, state, changed_at desc, number desc) where archived_at is null;
       create index series_by_name on series (lab_id, lower(loudspeaker_name), number desc) where archived_at is null;
       create index series_by_reached on series (lab_id, reached_db desc nulls last, number desc) where archived_at is null;
       create index series_by_loudspeaker on series (lab_id, loudspeaker_id);

       create function name_series_after_loudspeaker() returns trigger language plpgsql
         set search_path = public, pg_temp as $$
       begin
         if tg_table_name = 'series' then
           select maker || ' ' || model into new.loudspeaker_name from loudspeakers
             where lab_id = new.lab_id and id = new.loudspeaker_id;
           new.loudspeaker_name := coalesce(new.loudspeaker_name, '');
           return new;
         end if;
         update series set loudspeaker_name = new.maker || ' ' || new.model
           where lab_id = new.lab_id and loudspeaker_id = new.id;
         return null;
       end $$;
       create trigger take_name before insert or update of loudspeaker_id on series
         for each row execute function name_series_after_loudspeaker();
       create trigger give_name after update of maker, model on loudspeakers
         for each row execute function name_series_after_loudspeaker();

       create table uploads (
         id text primary key,
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         slot text,
         channel integer not null default 1 check (channel > 0),
         file_name text not null,
         bytes bigint not null check (bytes >= 0),
         received bigint not null default 0 check (received between 0 and bytes),
         account_id uuid not null,
         token_id uuid,
         created_at timestamptz not null default now(),
         expires_at timestamptz not null,
         finished_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, account_id) references memberships (lab_id, account_id),
         foreign key (lab_id, token_id) references api_tokens (lab_id, id)
       );
       create index uploads_by_series on uploads (lab_id, series_id);
       create index uploads_by_expiry on uploads (expires_at) where finished_at is null;

       create table runs (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         -- Place in the plan; null while the file fits no planned run.
         slot text,
         take integer not null default 1 check (take > 0),
         role text check (role in ('calibrator-before', 'ambient', 'short-term', 'long-term',
           'variant', 'closing', 'calibrator-after')),
         level_db double precision,
         variant text,
         file_name text not null,
         digest char(64) not null,
         channel integer not null default 1 check (channel > 0),
         state text not null default 'checking' check (state in
           ('checking', 'passed', 'warned', 'failed', 'kept', 'excluded', 'replaced')),
         report json,
         reason text,
         reason_by uuid,
         reason_at timestamptz,
         uploaded_by uuid not null,
         uploaded_by_token uuid,
         uploaded_at timestamptz not null default now(),
         changed_at timestamptz not null default now(),
         unique (lab_id, id),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, digest) references recordings (lab_id, digest),
         foreign key (lab_id, reason_by) references memberships (lab_id, account_id),
         foreign key (lab_id, uploaded_by) references memberships (lab_id, account_id),
         foreign key (lab_id, uploaded_by_token) references api_tokens (lab_id, id),
         check ((slot is null) = (role is null)),
         check (state not in ('kept', 'excluded') or reason is not null)
       );
       create unique index runs_one_live_per_slot on runs (series_id, slot)
         where slot is not null and state not in ('replaced', 'excluded');
       create index runs_by_series on runs (lab_id, series_id, uploaded_at);
       create index runs_by_digest on runs (lab_id, digest);
       -- Planned runs that go without a recording, each with its reason.
       create table slot_excuses (
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         slot text not null,
         reason text not null,
         excused_by uuid not null,
         excused_at timestamptz not null default now(),
         primary key (series_id, slot),
         foreign key (lab_id, series_id) references series (lab_id, id) on delete cascade,
         foreign key (lab_id, excused_by) references memberships (lab_id, account_id)
       );
       create index runs_checking on runs (changed_at) where state = 'checking';`,
    )
    .execute(db);
  await protectByLab(db, "recordings", ["select", "insert", "delete"]);
  await protectByLab(db, "loudspeakers", ["select", "insert", "update"]);
  await protectByLab(db, "series_counters", ["select", "insert", "update"]);
  await protectByLab(db, "series", ["select", "insert", "update", "delete"]);
  await protectByLab(db, "uploads", ["select", "insert", "update", "delete"]);
  await protectByLab(db, "runs", ["select", "insert", "update", "delete"]);
  await protectByLab(db, "slot_excuses", ["select", "insert", "update", "delete"]);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `drop table slot_excuses, runs, uploads, series, series_counters, loudspeakers, recordings;
       drop function name_series_after_loudspeaker();`,
    )
    .execute(db);
}
