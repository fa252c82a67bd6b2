/** Labs, accounts, who belongs where, and the ways in: sessions, invitations, tokens. */
import { sql, type Kysely } from "kysely";
import {
  CURRENT_ACCOUNT,
  CURRENT_LAB,
  enforceRowSecurity,
  protectByAccount,
  protectByLab,
} from "./row-security";

const ROLES = "array['tester', 'analyst', 'reviewer', 'admin']::text[]";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `revoke all on schema public from public;
       grant usage on schema public to tidemark_app;

       create table labs (
         id uuid primary key default gen_random_uuid(),
         slug text not null unique check (slug ~ '^[a-z0-9]([a-z0-9-]{0,38}[a-z0-9])?$'),
         name text not null check (length(name) between 1 and 120),
         time_zone text not null default 'UTC',
         settings jsonb not null default '{}',
         created_at timestamptz not null default now()
       );

       create table accounts (
         id uuid primary key default gen_random_uuid(),
         email text not null unique check (email = lower(email) and length(email) between 3 and 254),
         name text not null check (length(name) between 1 and 120),
         theme text not null default 'system' check (theme in ('system', 'light', 'dark')),
         created_at timestamptz not null default now(),
         disabled_at timestamptz
       );

       -- Apart from accounts: colleagues may read a name, nobody else may read a hash.
       create table account_passwords (
         account_id uuid primary key references accounts (id),
         password_hash text not null,
         password_changed_at timestamptz not null default now()
       );

       create table memberships (
         lab_id uuid not null references labs (id),
         account_id uuid not null references accounts (id),
         roles text[] not null check (roles <@ ${ROLES} and cardinality(roles) > 0),
         created_at timestamptz not null default now(),
         removed_at timestamptz,
         primary key (lab_id, account_id)
       );
       create index memberships_by_account on memberships (account_id);

       create table sessions (
         id uuid primary key default gen_random_uuid(),
         account_id uuid not null references accounts (id),
         lab_id uuid,
         created_at timestamptz not null default now(),
         last_seen_at timestamptz not null default now(),
         expires_at timestamptz not null,
         user_agent text not null default '',
         ip text not null default '',
         ended_at timestamptz,
         foreign key (lab_id, account_id) references memberships (lab_id, account_id)
       );
       create index sessions_by_account on sessions (account_id, created_at desc);

       create table invitations (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null references labs (id),
         email text not null check (email = lower(email) and length(email) between 3 and 254),
         name text not null default '',
         roles text[] not null check (roles <@ ${ROLES} and cardinality(roles) > 0),
         token_hash char(64) not null unique,
         created_by uuid,
         created_at timestamptz not null default now(),
         expires_at timestamptz not null,
         used_at timestamptz,
         withdrawn_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, created_by) references memberships (lab_id, account_id)
       );
       create index invitations_by_lab on invitations (lab_id, created_at desc);

       create table api_tokens (
         id uuid primary key default gen_random_uuid(),
         lab_id uuid not null,
         account_id uuid not null,
         name text not null check (length(name) between 1 and 80),
         token_hash char(64) not null unique,
         prefix text not null,
         roles text[] not null check (roles <@ ${ROLES} and cardinality(roles) > 0),
         created_at timestamptz not null default now(),
         last_used_at timestamptz,
         expires_at timestamptz,
         revoked_at timestamptz,
         unique (lab_id, id),
         foreign key (lab_id, account_id) references memberships (lab_id, account_id)
       );
       create index api_tokens_by_lab on api_tokens (lab_id, created_at desc);

       -- Counters of rate-limiter-flexible; keys hold hashes, no addresses. Belongs to no lab.
       create table rate_limits (key varchar(255) primary key, points integer not null default 0, expire bigint);
       grant select, insert, update, delete on rate_limits to tidemark_app;`,
    )
    .execute(db);

  await enforceRowSecurity(db, "labs");
  await enforceRowSecurity(db, "accounts");
  await protectByAccount(db, "account_passwords", ["select", "insert", "update"]);
  await protectByAccount(db, "sessions", ["select", "insert", "update"]);
  await protectByLab(db, "memberships", ["select", "insert", "update"]);
  await protectByLab(db, "invitations", ["select", "insert", "update"]);
  await protectByLab(db, "api_tokens", ["select", "insert", "update"]);

  await sql
    .raw(
      `grant select, update (name, time_zone, settings) on labs to tidemark_app;
       create policy lab on labs for all to tidemark_app
         using (id = ${CURRENT_LAB}) with check (id = ${CURRENT_LAB});
       create policy member on labs for select to tidemark_app
         using (exists (select from memberships m where m.lab_id = labs.id
           and m.account_id = ${CURRENT_ACCOUNT} and m.removed_at is null));

       -- Labs are founded by the command line alone, never by the web.
       create policy founding on labs for insert to tidemark_owner with check (true);

       create policy own on memberships for select to tidemark_app using (account_id = ${CURRENT_ACCOUNT});

       grant select, insert, update (name, theme) on accounts to tidemark_app;
       create policy own on accounts for all to tidemark_app
         using (id = ${CURRENT_ACCOUNT}) with check (id = ${CURRENT_ACCOUNT});
       -- Former members too: the trail goes on naming them.
       create policy colleague on accounts for select to tidemark_app
         using (exists (select from memberships m where m.account_id = accounts.id
           and m.lab_id = ${CURRENT_LAB}));

       -- Rows may come in any order inside a transaction; what counts is how it ends. The advisory
       -- lock makes two admins who remove each other at the same moment wait for one another.
       create function keep_last_admin() returns trigger language plpgsql
         set search_path = public, pg_temp as $$
       begin
         perform pg_advisory_xact_lock(hashtextextended('last admin ' || old.lab_id::text, 0));
         if not exists (select from memberships where lab_id = old.lab_id
                        and removed_at is null and 'admin' = any (roles)) then
           raise exception 'a lab keeps at least one admin'
             using errcode = '23514', constraint = 'last_admin', table = 'memberships';
         end if;
         return null;
       end $$;
       create constraint trigger last_admin after update or delete on memberships
         deferrable initially deferred for each row
         when ('admin' = any (old.roles) and old.removed_at is null)
         execute function keep_last_admin();`,
    )
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(
      `drop table rate_limits, api_tokens, invitations, sessions, account_passwords cascade;
       drop policy member on labs;
       drop policy colleague on accounts;
       drop table memberships;
       drop function keep_last_admin();
       drop table accounts, labs;
       revoke usage on schema public from tidemark_app;`,
    )
    .execute(db);
}
