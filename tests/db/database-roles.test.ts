/** Which database role may do what; functions that see past the walls. */
import { sql } from "kysely";
import pg from "pg";
import { describe, expect, it } from "vitest";
import { makeLab, openDatabase } from "./support";

const bench = openDatabase();

describe("database roles", () => {
  it("leave the application without power over the walls", async () => {
    const { rows } =
      await sql`select rolsuper, rolbypassrls, rolcreaterole, rolcreatedb, rolreplication,
        pg_has_role(rolname, 'tidemark_owner', 'member') as owner,
        pg_has_role(rolname, 'tidemark_migrator', 'member') as migrator
      from pg_roles where rolname = current_user`.execute(bench.app);
    expect(rows).toEqual([
      {
        rolsuper: false,
        rolbypassrls: false,
        rolcreaterole: false,
        rolcreatedb: false,
        rolreplication: false,
        owner: false,
        migrator: false,
      },
    ]);
  });

  it("give every object to the owner and nothing to the application", async () => {
    const { rows } = await sql<{ owner: string }>`
      select distinct pg_get_userbyid(relowner) as owner from pg_class
      where relnamespace = 'public'::regnamespace`.execute(bench.app);
    expect(rows).toEqual([{ owner: "tidemark_owner" }]);
  });

  it("keep the owner no superuser and bound by the walls", async () => {
    await makeLab(bench, "walls");
    const { rows } = await sql<{ rolsuper: boolean; rolbypassrls: boolean }>`
      select rolsuper, rolbypassrls from pg_roles
      where rolname in ('tidemark_owner', 'tidemark_migrator', 'tidemark_queue')`.execute(
      bench.owner,
    );
    expect(rows).toHaveLength(3);
    expect(rows.filter((role) => role.rolsuper || role.rolbypassrls)).toEqual([]);
    const memberships = await bench.owner.selectFrom("memberships").selectAll().execute();
    expect(memberships).toEqual([]);
  });

  it.each([
    ["create table x (a int)"],
    ["alter table series disable row level security"],
    ["drop policy lab on series"],
    ["set role tidemark_owner"],
    ["truncate series"],
    ["insert into labs (slug, name) values ('mine', 'Mine')"],
    ["select * from bullmq.job"],
    ["select * from kysely_migration"],
    ["create schema mine"],
  ])("refuse the application: %s", async (statement) => {
    await expect(sql.raw(statement).execute(bench.app)).rejects.toThrow(
      /permission denied|must be owner|row-level security/,
    );
  });

  it("keep the queue in its own schema", async () => {
    const client = new pg.Client({ connectionString: bench.database.connectionString("queue") });
    await client.connect();
    try {
      const owned = await client.query(
        `select nspname from pg_namespace where pg_get_userbyid(nspowner) = 'tidemark_queue'
           and nspname !~ '^pg_'`,
      );
      expect(owned.rows).toEqual([{ nspname: "bullmq" }]);
      await expect(client.query("select * from public.series")).rejects.toThrow(
        /permission denied|does not exist/,
      );
      await expect(client.query("create schema another")).rejects.toThrow(/permission denied/);
    } finally {
      await client.end();
    }
  });

  it("store every password as SCRAM", async () => {
    const client = new pg.Client({
      connectionString: bench.database.connectionString("superuser"),
    });
    await client.connect();
    try {
      const { rows } = await client.query<{ rolname: string; scram: boolean }>(
        `select rolname, rolpassword like 'SCRAM-SHA-256$%' as scram from pg_authid
         where rolname like 'tidemark%' order by 1`,
      );
      expect(rows.map((row) => row.rolname)).toEqual([
        "tidemark_app",
        "tidemark_migrator",
        "tidemark_owner",
        "tidemark_queue",
        "tidemark_superuser",
      ]);
      expect(rows.filter((row) => !row.scram)).toEqual([]);
    } finally {
      await client.end();
    }
  });
});

describe("security-definer functions", () => {
  it("are these and no others, with a fixed search path, for the application alone", async () => {
    const { rows } = await sql<{
      name: string;
      result: string;
      path: string[] | null;
      everybody: boolean;
      owner: string;
    }>`select p.proname as name, pg_get_function_result(p.oid) as result, p.proconfig as path,
        has_function_privilege('tidemark_queue', p.oid, 'execute') as everybody,
        pg_get_userbyid(p.proowner) as owner
      from pg_proc p join pg_namespace n on n.oid = p.pronamespace
      where p.prosecdef and n.nspname not in ('pg_catalog', 'information_schema')
      order by 1`.execute(bench.app);
    expect(rows.map((row) => `${row.name}: ${row.result}`)).toEqual([
      "find_account_for_sign_in: TABLE(account_id uuid)",
      "find_account_link: TABLE(account_id uuid, link_id uuid)",
      "find_due_mails: TABLE(lab_id uuid, account_id uuid, mail_id uuid)",
      "find_expired_uploads: TABLE(lab_id uuid, upload_id text)",
      "find_forgotten_analyses: TABLE(lab_id uuid, analysis_id uuid)",
      "find_forgotten_checks: TABLE(lab_id uuid, run_id uuid)",
      "find_invitation: TABLE(invitation_id uuid, lab_id uuid)",
      "find_labs_with_retention: TABLE(lab_id uuid)",
      "find_preview: TABLE(lab_id uuid, preview_id uuid)",
      "find_publication: TABLE(lab_id uuid, publication_id uuid)",
      "find_session: TABLE(account_id uuid, lab_id uuid)",
      "find_token: TABLE(token_id uuid, lab_id uuid, account_id uuid)",
      "find_unheld_digests: TABLE(digest text)",
      "list_published: TABLE(lab_id uuid, publication_id uuid)",
    ]);
    for (const row of rows) {
      expect(row).toMatchObject({ path: ["search_path=public, pg_temp"], everybody: false });
      expect(row.owner).toBe("tidemark_owner");
    }
  });
});
