/** Mail: an outbox written with the act it reports, what members want to hear, one-time account links. */
import { sql, type Kysely } from "kysely";
import {
  CURRENT_ACCOUNT,
  CURRENT_LAB,
  enforceRowSecurity,
  protectByAccount,
  protectByLab,
} from "./row-security";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `create table mails (
         id uuid primary key default gen_random_uuid(),
         -- null: to an account, about the account alone.
         lab_id uuid references labs (id),
         account_id uuid references accounts (id),
         kind text not null,
         to_address text not null,
         -- What the template needs; no secrets beyond the one-time link.
         payload json not null,
         created_at timestamptz not null default now(),
         attempts integer not null default 0,
         next_attempt_at timestamptz not null default now(),
         sent_at timestamptz,
         given_up_at timestamptz,
         last_error text,
         check (lab_id is not null or account_id is not null)
       );
       create index mails_due on mails (next_attempt_at) where sent_at is null and given_up_at is null;

       create table notice_choices (
         lab_id uuid not null references labs (id),
         account_id uuid not null,
         kind text not null,
         wanted boolean not null,
         primary key (lab_id, account_id, kind),
         foreign key (lab_id, account_id) references memberships (lab_id, account_id)
       );

       create table account_links (
         id uuid primary key default gen_random_uuid(),
         account_id uuid not null references accounts (id),
         purpose text not null check (purpose in ('reset-password', 'change-address')),
         token_hash char(64) not null unique,
         new_address text,
         created_at timestamptz not null default now(),
         expires_at timestamptz not null,
         used_at timestamptz
       );`,
    )
    .execute(db);
  await enforceRowSecurity(db, "mails");
  await sql
    .raw(
      `create policy mail on mails for all to tidemark_app
         using (lab_id = ${CURRENT_LAB} or (lab_id is null and account_id = ${CURRENT_ACCOUNT}))
         with check (lab_id = ${CURRENT_LAB} or (lab_id is null and account_id = ${CURRENT_ACCOUNT}));
       grant select, insert, update on mails to tidemark_app;`,
    )
    .execute(db);
  await protectByLab(db, "notice_choices", ["select", "insert", "update"]);
  await protectByAccount(db, "account_links", ["select", "insert", "update"]);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`drop table account_links, notice_choices, mails;`).execute(db);
}
