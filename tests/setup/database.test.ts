import pg from "pg";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { DATABASE_ROLES, type DatabaseRole } from "../../lib/config/secrets";
import { toConnectionString } from "../../lib/config/environment";
import { ensureDatabase, ensureRoles } from "../../scripts/setup/database";
import { createTestDatabase, type TestDatabase } from "../support/database";

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());

async function query<Row extends pg.QueryResultRow>(
  connectionString: string,
  text: string,
): Promise<Row[]> {
  const client = new pg.Client({ connectionString });
  await client.connect();
  try {
    return (await client.query<Row>(text)).rows;
  } finally {
    await client.end();
  }
}

describe("roles of the cluster", () => {
  it("only the bootstrap role is a superuser, and every password is kept as SCRAM", async () => {
    const rows = await query<{ rolname: string; rolsuper: boolean; free: boolean; scram: boolean }>(
      database.connectionString("superuser"),
      `select rolname, rolsuper, rolbypassrls or rolcreatedb or rolcreaterole as free,
              rolpassword like 'SCRAM-SHA-256$%' as scram
         from pg_authid where rolname like 'tidemark%' order by rolname`,
    );
    const plain = { rolsuper: false, free: false, scram: true };
    expect(rows).toEqual([
      { rolname: "tidemark_app", ...plain },
      { rolname: "tidemark_migrator", ...plain },
      { rolname: "tidemark_owner", ...plain },
      { rolname: "tidemark_queue", ...plain },
      { rolname: "tidemark_superuser", rolsuper: true, free: true, scram: true },
    ]);
  });

  it("the database belongs to the owner, and others enter by grant alone", async () => {
    const rows = await query<{ owner: string; grantee: string; privilege: string }>(
      database.connectionString("superuser"),
      `select pg_get_userbyid(datdba) as owner, privilege_type as privilege,
              case when grantee = 0 then 'public' else pg_get_userbyid(grantee) end as grantee
         from pg_database, aclexplode(datacl)
        where datname = current_database() and grantee <> datdba order by grantee::text, 2`,
    );
    const granted = rows.map(({ grantee, privilege }) => `${grantee} ${privilege}`).toSorted();
    expect(granted).toEqual([
      "tidemark_app CONNECT",
      "tidemark_migrator CONNECT",
      "tidemark_queue CONNECT",
    ]);
    expect(new Set(rows.map(({ owner }) => owner))).toEqual(new Set(["tidemark_owner"]));
  });

  it.each(DATABASE_ROLES)("%s signs in", async (role) => {
    const rows = await query<{ name: string }>(
      database.connectionString(role),
      "select current_user as name",
    );
    expect(rows).toEqual([{ name: `tidemark_${role}` }]);
  });

  it.each<DatabaseRole>(["superuser", "migrator", "app", "queue"])(
    "%s is refused with a wrong password",
    async (role) => {
      const url = new URL(database.connectionString(role));
      url.password = "wrong";
      await expect(query(url.href, "select 1")).rejects.toMatchObject({ code: "28P01" });
    },
  );

  it("may be made again over what stands", async () => {
    const access = { ...database, databaseName: database.databaseName };
    await ensureRoles(access);
    await ensureDatabase(access, database.databaseName);
    const rows = await query<{ one: number }>(toConnectionString(access, "app"), "select 1 as one");
    expect(rows).toEqual([{ one: 1 }]);
  });
});

describe("databases of the tests", () => {
  it("hold the migrated tables and are apart from each other", async () => {
    const other = await createTestDatabase();
    try {
      const tables = `select count(*)::int as tables from pg_tables where schemaname = 'public'`;
      const [mine] = await query<{ tables: number }>(database.connectionString("owner"), tables);
      await query(other.connectionString("owner"), "create table only_here (id int)");
      const [theirs] = await query<{ tables: number }>(other.connectionString("owner"), tables);
      expect(mine?.tables).toBeGreaterThan(10);
      expect(theirs?.tables).toBe((mine?.tables ?? 0) + 1);
    } finally {
      await other.drop();
    }
  });
});
