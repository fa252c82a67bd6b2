/** Review: decisions per band, comments, runs asked for, sign-offs. Nothing here is overwritten. */
import { sql, type Kysely } from "kysely";
import { protectByLab } from "./row-security";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `create table band_decisions (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         analysis_id uuid not null,
         nominal_hz double precision not null,
         -- Counted per band of an analysis, from 1; the highest is the one in force.
         version integer not null check (version > 0),
         -- null: the band was opened again.
         cause text check (cause in ('limiter', 'compressor', 'equaliser', 'overload', 'port',
           'thermal', 'none', 'unresolved', 'distortion only')),
         computed_cause text not null,
         reason text,
         decided_by uuid not null,
         decided_at timestamptz not null default now(),
         unique (lab_id, id),
         unique (analysis_id, nominal_hz, version),
         foreign key (lab_id, analysis_id) references analyses (lab_id, id),
         foreign key (lab_id, decided_by) references memberships (lab_id, account_id),
         check (cause is null or cause = computed_cause or reason is not null)
       );

       create table band_comments (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         analysis_id uuid not null,
         -- null: about the whole series.
         nominal_hz double precision,
         words text not null check (length(words) between 1 and 2000),
         written_by uuid not null,
         written_at timestamptz not null default now(),
         foreign key (lab_id, analysis_id) references analyses (lab_id, id),
         foreign key (lab_id, written_by) references memberships (lab_id, account_id)
       );
       create index band_comments_by_analysis on band_comments (lab_id, analysis_id, written_at);

       create table run_requests (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         level_db double precision not null,
         kind text not null check (kind in ('short-term', 'long-term')),
         variant text,
         reason text not null,
         -- The place in the plan that the request opened.
         slot text not null,
         requested_by uuid not null,
         requested_at timestamptz not null default now(),
         withdrawn_by uuid,
         withdrawn_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, requested_by) references memberships (lab_id, account_id),
         foreign key (lab_id, withdrawn_by) references memberships (lab_id, account_id)
       );
       create unique index run_requests_open on run_requests (series_id, slot) where withdrawn_at is null;

       create table sign_offs (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         series_id uuid not null,
         analysis_id uuid not null,
         criterion json not null,
         -- The decisions as they stood, canonical, and their SHA-256.
         decisions json not null,
         decisions_digest char(64) not null,
         -- SHA-256 of the result that was signed.
         result_digest char(64) not null,
         -- The two-person rule was off and one person did both.
         one_person boolean not null default false,
         signed_by uuid not null,
         signed_at timestamptz not null default now(),
         reopened_by uuid,
         reopened_at timestamptz,
         reopen_reason text,
         unique (lab_id, id),
         foreign key (lab_id, series_id) references series (lab_id, id),
         foreign key (lab_id, analysis_id) references analyses (lab_id, id),
         foreign key (lab_id, signed_by) references memberships (lab_id, account_id),
         foreign key (lab_id, reopened_by) references memberships (lab_id, account_id),
         check ((reopened_at is null) = (reopen_reason is null))
       );
       create unique index sign_offs_standing on sign_offs (series_id) where reopened_at is null;`,
    )
    .execute(db);
  await protectByLab(db, "band_decisions", ["select", "insert"]);
  await protectByLab(db, "band_comments", ["select", "insert"]);
  await protectByLab(db, "run_requests", ["select", "insert", "update"]);
  await protectByLab(db, "sign_offs", ["select", "insert", "update"]);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`drop table sign_offs, run_requests, band_comments, band_decisions;`).execute(db);
}
