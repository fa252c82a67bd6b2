/** What callers learn when PostgreSQL is away, and that they recover by themselves. */
import { sql } from "kysely";
import pg from "pg";
import { describe, expect, it } from "vitest";
import { createDatabase } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { type Lab, makeLab, openDatabase } from "./support";

const bench = openDatabase();

async function endOtherConnections(): Promise<void> {
  const client = new pg.Client({ connectionString: bench.database.connectionString("superuser") });
  await client.connect();
  await client.query(
    `select pg_terminate_backend(pid) from pg_stat_activity
     where datname = current_database() and usename = 'tidemark_app'`,
  );
  await client.end();
}

const countLabs = (lab: Lab): Promise<number> =>
  inLab(
    bench.app,
    lab.admin,
    async (trx) => (await trx.selectFrom("labs").select("id").execute()).length,
  );

describe("a database that is away", () => {
  it("is said to be, with a code that may be tried again", async () => {
    const away = createDatabase({ connectionString: "postgres://x:y@127.0.0.1:1/z" });
    const scope = { labId: "00000000-0000-4000-8000-000000000000", accountId: null };
    const refused = await inLab(away, scope, async () => 1).catch((error: unknown) => error);
    expect(refused).toMatchObject({ code: "database.unavailable", status: 503, retryable: true });
    await away.destroy();
  });

  it("breaks a transaction that is under way, and serves the next one", async () => {
    const lab = await makeLab(bench, "outage");
    const broken = inLab(bench.app, lab.admin, async (trx) => {
      await endOtherConnections();
      await sql`select 1`.execute(trx);
    });
    await expect(broken).rejects.toMatchObject({ code: "database.unavailable" });
    expect(await countLabs(lab)).toBe(1);
  });

  it("is got over by idle connections without a word", async () => {
    const lab = await makeLab(bench, "idle");
    expect(await countLabs(lab)).toBe(1);
    await endOtherConnections();
    await new Promise((resolve) => setTimeout(resolve, 100));
    expect(await countLabs(lab)).toBe(1);
  });
});
