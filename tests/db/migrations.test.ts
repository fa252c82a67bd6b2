import { sql } from "kysely";
import { describe, expect, it } from "vitest";
import { migrateDown, migrateToLatest } from "../../db/migrate";
import { MIGRATIONS } from "../../db/migrations/index";
import { makeLab, makeSeries, openDatabase } from "./support";

const bench = openDatabase();

/** Everything in our schema, as text: tables with columns, indices, policies, functions, grants. */
async function describeSchema(): Promise<string[]> {
  const { rows } = await sql<{ line: string }>`
    select 'column ' || table_name || '.' || column_name || ' ' || data_type || ' ' || is_nullable
      || ' ' || coalesce(column_default, '') as line
      from information_schema.columns where table_schema = 'public'
    union all select 'index ' || indexdef from pg_indexes where schemaname = 'public'
    union all select 'constraint ' || conrelid::regclass || ' ' || pg_get_constraintdef(oid)
      from pg_constraint where connamespace = 'public'::regnamespace
    union all select 'policy ' || tablename || ' ' || policyname || ' ' || roles::text || ' '
      || coalesce(qual, '') || ' ' || coalesce(with_check, '') from pg_policies
    union all select 'function ' || pg_get_functiondef(oid) from pg_proc
      where pronamespace = 'public'::regnamespace
    union all select 'grant ' || table_name || ' ' || grantee || ' ' || privilege_type
      from information_schema.role_table_grants where table_schema = 'public'
    union all select 'trigger ' || pg_get_triggerdef(oid) from pg_trigger where not tgisinternal
    order by 1`.execute(bench.owner);
  return rows.map((row) => row.line);
}

describe("migrations", () => {
  it("stand in the order of their names", () => {
    const names = Object.keys(MIGRATIONS);
    expect(names).toEqual(names.toSorted());
    expect(names.length).toBeGreaterThan(5);
  });

  it("go down one by one, with data in the tables, and up to the same schema again", async () => {
    await makeSeries(bench, await makeLab(bench, "down"));
    const before = await describeSchema();
    const migrator = bench.database.connectionString("migrator");
    const names = Object.keys(MIGRATIONS);
    expect(await migrateDown(migrator)).toEqual(names.toReversed());
    const left = await describeSchema();
    expect(left.filter((line) => !line.includes("kysely_migration"))).toEqual([]);
    expect(await migrateToLatest(migrator)).toEqual(names);
    expect(await describeSchema()).toEqual(before);
    expect(await migrateToLatest(migrator)).toEqual([]);
  });

  it("say which one failed", async () => {
    const migrator = bench.database.connectionString("migrator");
    await migrateDown(migrator);
    await sql`create table series (id int)`.execute(bench.owner);
    await expect(migrateToLatest(migrator)).rejects.toMatchObject({
      code: "database.migration",
      message: expect.stringMatching(/-capture failed: .*already exists/) as string,
    });
  });
});
