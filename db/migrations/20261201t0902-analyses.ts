/** Analyses with the curves and band results that they left. */
import { sql, type Kysely } from "kysely";
import { protectByLab } from "./row-security";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `create table analyses (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         version integer not null check (version > 0),
         state text not null default 'queued' check (state in ('queued', 'running', 'done', 'failed', 'cancelled')),
         -- json, not jsonb, where the order of keys is part of what is kept.
         inputs json not null,
         inputs_digest char(64) not null,
         settings json not null,
         engine_version text not null,
         progress json,
         head json,
         error json,
         requested_by uuid,
         requested_at timestamptz not null default now(),
         started_at timestamptz,
         finished_at timestamptz,
         attempts integer not null default 0,
         heartbeat_at timestamptz,
         unique (lab_id, id),
         unique (series_id, version),
         unique (series_id, inputs_digest, engine_version),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, requested_by) references memberships (lab_id, account_id),
         check (state <> 'done' or head is not null),
         check (state <> 'failed' or error is not null)
       );
       create index analyses_by_series on analyses (lab_id, series_id, version desc);
       create index analyses_open on analyses (requested_at) where state in ('queued', 'running');

       create table analysis_runs (
         analysis_id uuid not null,
         lab_id uuid not null references labs (id),
         position integer not null check (position >= 0),
         run_id uuid,
         payload json not null,
         primary key (analysis_id, position),
         foreign key (lab_id, analysis_id) references analyses (lab_id, id) on delete cascade,
         foreign key (lab_id, run_id) references runs (lab_id, id)
       );

       create table analysis_bands (
         analysis_id uuid not null,
         lab_id uuid not null references labs (id),
         position integer not null check (position >= 0),
         nominal_hz double precision not null,
         exact_hz double precision not null,
         cause text not null,
         onset_status text not null,
         onset_db double precision,
         payload json not null,
         primary key (analysis_id, position),
         foreign key (lab_id, analysis_id) references analyses (lab_id, id) on delete cascade
       );`,
    )
    .execute(db);
  await protectByLab(db, "analyses", ["select", "insert", "update"]);
  await protectByLab(db, "analysis_runs", ["select", "insert", "delete"]);
  await protectByLab(db, "analysis_bands", ["select", "insert", "delete"]);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`drop table analysis_bands, analysis_runs, analyses;`).execute(db);
}
