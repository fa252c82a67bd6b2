/**
 * The few things that must be found before a lab is known. Each is a function of the owner with a
 * fixed search path that answers ids and nothing else. Row-level security binds the owner too, so
 * the tables that these functions read, and no others, let the owner read.
 */
import { sql, type Kysely } from "kysely";

const LOOKUPS = [
  {
    head: "find_account_for_sign_in(wanted_email text) returns table (account_id uuid)",
    body: `select a.id from accounts a where a.email = lower(wanted_email) and a.disabled_at is null`,
  },
  {
    head: "find_session(wanted_id uuid) returns table (account_id uuid, lab_id uuid)",
    body: `select s.account_id, s.lab_id from sessions s join accounts a on a.id = s.account_id
      where s.id = wanted_id and s.ended_at is null and s.expires_at > now() and a.disabled_at is null`,
  },
  {
    head: "find_token(wanted_hash text) returns table (token_id uuid, lab_id uuid, account_id uuid)",
    body: `select t.id, t.lab_id, t.account_id from api_tokens t join accounts a on a.id = t.account_id
      where t.token_hash = wanted_hash and t.revoked_at is null
        and (t.expires_at is null or t.expires_at > now()) and a.disabled_at is null`,
  },
  {
    head: "find_invitation(wanted_hash text) returns table (invitation_id uuid, lab_id uuid)",
    body: `select i.id, i.lab_id from invitations i where i.token_hash = wanted_hash
      and i.used_at is null and i.withdrawn_at is null and i.expires_at > now()`,
  },
  {
    head: "find_forgotten_analyses(older_than interval) returns table (lab_id uuid, analysis_id uuid)",
    body: `select a.lab_id, a.id from analyses a where a.state in ('queued', 'running')
      and coalesce(a.heartbeat_at, a.requested_at) < now() - older_than
      order by a.requested_at limit 500`,
  },
  {
    head: "find_forgotten_checks(older_than interval) returns table (lab_id uuid, run_id uuid)",
    body: `select r.lab_id, r.id from runs r where r.state = 'checking' and r.changed_at < now() - older_than
      order by r.changed_at limit 500`,
  },
  {
    head: "find_expired_uploads() returns table (lab_id uuid, upload_id text)",
    body: `select u.lab_id, u.id from uploads u where u.finished_at is null and u.expires_at < now()
      order by u.expires_at limit 500`,
  },
] as const;

const SIGNATURES = [
  "find_account_for_sign_in(text)",
  "find_session(uuid)",
  "find_token(text)",
  "find_invitation(text)",
  "find_forgotten_analyses(interval)",
  "find_forgotten_checks(interval)",
  "find_expired_uploads()",
] as const;

const TABLES = [
  "accounts",
  "sessions",
  "api_tokens",
  "invitations",
  "analyses",
  "runs",
  "uploads",
] as const;

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const table of TABLES) {
    await sql
      .raw(`create policy lookup on ${table} for select to tidemark_owner using (true);`)
      .execute(db);
  }
  for (const { head, body } of LOOKUPS) {
    await sql
      .raw(
        `create function ${head} language sql stable security definer
           set search_path = public, pg_temp as $$ ${body} $$;`,
      )
      .execute(db);
  }
  for (const signature of SIGNATURES) {
    await sql
      .raw(
        `revoke all on function ${signature} from public;
         grant execute on function ${signature} to tidemark_app;`,
      )
      .execute(db);
  }
}

export async function down(db: Kysely<unknown>): Promise<void> {
  for (const signature of SIGNATURES) await sql.raw(`drop function ${signature};`).execute(db);
  for (const table of TABLES) await sql.raw(`drop policy lookup on ${table};`).execute(db);
}
