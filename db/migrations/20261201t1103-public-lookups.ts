/** What is found before a lab is known, for readers, makers and mail. Ids only, as with the first lookups. */
import { sql, type Kysely } from "kysely";

const LOOKUPS = [
  {
    signature: "find_publication(text, text, integer)",
    head: "find_publication(lab_slug text, series_slug text, wanted_revision integer) returns table (lab_id uuid, publication_id uuid)",
    // The newest revision where none is named; what is under embargo does not exist yet.
    body: `select p.lab_id, p.id from publications p join labs l on l.id = p.lab_id
      where l.slug = lab_slug and p.slug = series_slug
        and (wanted_revision is null or p.revision = wanted_revision)
        and (p.embargo_until is null or p.embargo_until <= now())
      order by p.revision desc limit 1`,
  },
  {
    signature: "list_published()",
    head: "list_published() returns table (lab_id uuid, publication_id uuid)",
    body: `select p.lab_id, p.id from publications p
      where p.state = 'live' and (p.embargo_until is null or p.embargo_until <= now())
      order by p.published_at desc limit 5000`,
  },
  {
    signature: "find_preview(text)",
    head: "find_preview(wanted_hash text) returns table (lab_id uuid, preview_id uuid)",
    body: `select p.lab_id, p.id from previews p where p.token_hash = wanted_hash
      and p.revoked_at is null and p.expires_at > now()`,
  },
  {
    signature: "find_due_mails()",
    head: "find_due_mails() returns table (lab_id uuid, account_id uuid, mail_id uuid)",
    body: `select m.lab_id, m.account_id, m.id from mails m where m.sent_at is null
      and m.given_up_at is null and m.next_attempt_at <= now() order by m.next_attempt_at limit 200`,
  },
  {
    signature: "find_account_link(text)",
    head: "find_account_link(wanted_hash text) returns table (account_id uuid, link_id uuid)",
    body: `select k.account_id, k.id from account_links k join accounts a on a.id = k.account_id
      where k.token_hash = wanted_hash and k.used_at is null and k.expires_at > now()
        and a.disabled_at is null`,
  },
] as const;

const TABLES = ["labs", "publications", "previews", "mails", "account_links"] as const;

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const table of TABLES) {
    await sql
      .raw(`create policy public_lookup on ${table} for select to tidemark_owner using (true);`)
      .execute(db);
  }
  for (const { head, body, signature } of LOOKUPS) {
    await sql
      .raw(
        `create function ${head} language sql stable security definer
           set search_path = public, pg_temp as $$ ${body} $$;
         revoke all on function ${signature} from public;
         grant execute on function ${signature} to tidemark_app;`,
      )
      .execute(db);
  }
}

export async function down(db: Kysely<unknown>): Promise<void> {
  for (const { signature } of LOOKUPS) await sql.raw(`drop function ${signature};`).execute(db);
  for (const table of TABLES) await sql.raw(`drop policy public_lookup on ${table};`).execute(db);
}
