/** The walls between labs, held by PostgreSQL itself. Tables come from its catalogue, not from a list. */
import { sql } from "kysely";
import { beforeAll, describe, expect, it } from "vitest";
import type { Trx } from "../../db/client";
import { asAccount, inLab } from "../../db/in-lab";
import { recordEvent } from "../../db/queries/audit";
import { createInvitation } from "../../db/queries/invitations";
import { createSession } from "../../db/queries/sessions";
import { createToken } from "../../db/queries/tokens";
import { createUpload } from "../../db/queries/uploads";
import { createAnalysis } from "../../db/queries/analyses";
import { setExcuse } from "../../db/queries/runs";
import { makeLab, makeSeries, openDatabase, type Lab } from "./support";

const bench = openDatabase();
let own: Lab;
let other: Lab;
let otherSeries: Awaited<ReturnType<typeof makeSeries>>;

/** Tables that belong to no lab, each with the reason why it needs no wall. */
const WITHOUT_WALL = {
  rate_limits: "counters under hashed keys",
  kysely_migration: "not granted to the application",
  kysely_migration_lock: "not granted to the application",
};

beforeAll(async () => {
  own = await makeLab(bench, "own");
  other = await makeLab(bench, "other");
  otherSeries = await fill(other);
  await fill(own);
});

/** At least one row in every table that has a wall. */
async function fill(lab: Lab) {
  const series = await makeSeries(bench, lab);
  await inLab(bench.app, lab.admin, async (trx) => {
    const { accountId } = lab.admin;
    await createSession(trx, { accountId, labId: lab.id, userAgent: "", ip: "" });
    await createInvitation(trx, {
      labId: lab.id,
      email: "x@y.test",
      name: "",
      roles: ["tester"],
      tokenHash: lab.id.replaceAll("-", "").padEnd(64, "0"),
      createdBy: accountId,
    });
    await createToken(trx, {
      labId: lab.id,
      accountId,
      name: "t",
      tokenHash: lab.id.replaceAll("-", "").padEnd(64, "1"),
      prefix: "tdm_",
      roles: ["tester"],
      expiresAt: null,
    });
    await createUpload(trx, lab.id, {
      id: `u-${lab.id}`,
      seriesId: series.seriesId,
      slot: null,
      channel: 1,
      fileName: "a.wav",
      bytes: 10,
      accountId,
      tokenId: null,
      expiresAt: new Date(Date.now() + 86_400_000),
    });
    await setExcuse(trx, lab.id, accountId, {
      seriesId: series.seriesId,
      slot: "ambient",
      reason: "quiet",
    });
    const analysisId = await createAnalysis(trx, lab.id, {
      seriesId: series.seriesId,
      inputs: { series: {}, files: [] },
      inputsDigest: "c".repeat(64),
      settings: { criteria: [{ thd_percent: 3 }] },
      engineVersion: "1",
      requestedBy: null,
    });
    await sql`insert into analysis_runs (analysis_id, lab_id, position, payload)
      values (${analysisId}, ${lab.id}, 0, '{}')`.execute(trx);
    await sql`insert into analysis_bands
      (analysis_id, lab_id, position, nominal_hz, exact_hz, cause, onset_status, payload)
      values (${analysisId}, ${lab.id}, 0, 63, 63.1, 'none', 'found', '{}')`.execute(trx);
    await fillReview(trx, lab, series.seriesId, analysisId);
    await recordEvent(trx, lab.admin, {
      act: "series.created",
      subjectType: "series",
      subjectId: series.seriesId,
      seriesId: series.seriesId,
    });
  });
  return series;
}

async function fillReview(trx: Trx, lab: Lab, seriesId: string, analysisId: string) {
  const { id, admin } = lab;
  const hash = id.replaceAll("-", "").padEnd(64, "2");
  await sql`insert into band_decisions (lab_id, analysis_id, nominal_hz, version, cause, computed_cause, decided_by)
    values (${id}, ${analysisId}, 63, 1, 'limiter', 'limiter', ${admin.accountId})`.execute(trx);
  await sql`insert into band_comments (lab_id, analysis_id, nominal_hz, words, written_by)
    values (${id}, ${analysisId}, 63, 'steep', ${admin.accountId})`.execute(trx);
  await sql`insert into run_requests (lab_id, series_id, level_db, kind, reason, slot, requested_by)
    values (${id}, ${seriesId}, 91, 'short-term', 'narrower', 'short-91', ${admin.accountId})`.execute(
    trx,
  );
  const signOff = await sql<{ id: string }>`insert into sign_offs
    (lab_id, series_id, analysis_id, criterion, decisions, decisions_digest, result_digest, signed_by)
    values (${id}, ${seriesId}, ${analysisId}, '{}', '[]', ${hash}, ${hash}, ${admin.accountId})
    returning id`.execute(trx);
  const signOffId = signOff.rows[0]?.id;
  await sql`insert into publications
    (lab_id, series_id, sign_off_id, slug, revision, snapshot, digest, published_by)
    values (${id}, ${seriesId}, ${signOffId}, 'osier-5a', 1, '{}', ${hash}, ${admin.accountId})`.execute(
    trx,
  );
  const preview = await sql<{ id: string }>`insert into previews
    (lab_id, series_id, sign_off_id, token_hash, for_whom, snapshot, created_by, expires_at)
    values (${id}, ${seriesId}, ${signOffId}, ${hash}, 'maker', '{}', ${admin.accountId}, now())
    returning id`.execute(trx);
  await sql`insert into maker_comments (lab_id, series_id, preview_id, name, email, words)
    values (${id}, ${seriesId}, ${preview.rows[0]?.id}, 'M', 'm@maker.test', 'thanks')`.execute(
    trx,
  );
  await sql`insert into mails (lab_id, kind, to_address, payload)
    values (${id}, 'published', 'a@b.test', '{}')`.execute(trx);
  await sql`insert into notice_choices (lab_id, account_id, kind, wanted)
    values (${id}, ${admin.accountId}, 'published', true)`.execute(trx);
}

interface TableFacts {
  name: string;
  secured: boolean;
  forced: boolean;
  lab: boolean;
  account: boolean;
}

async function listTables(): Promise<TableFacts[]> {
  const { rows } = await sql<TableFacts>`
    select c.relname as name, c.relrowsecurity as secured, c.relforcerowsecurity as forced,
      exists (select from pg_attribute a where a.attrelid = c.oid and a.attname = 'lab_id') as lab,
      exists (select from pg_attribute a where a.attrelid = c.oid and a.attname = 'account_id') as account
    from pg_class c where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p')
    order by 1`.execute(bench.owner);
  return rows;
}

const walled = async (): Promise<TableFacts[]> =>
  (await listTables()).filter((table) => !(table.name in WITHOUT_WALL));

const count = async (trx: Parameters<Parameters<typeof inLab>[2]>[0], table: string) => {
  const { rows } = await sql<{ n: number }>`select count(*) as n from ${sql.table(table)}`.execute(
    trx,
  );
  return rows[0]?.n;
};

describe("row-level security", () => {
  it("is forced on every table but the named few", async () => {
    const tables = await walled();
    expect(tables.length).toBeGreaterThanOrEqual(18);
    expect(tables.filter((table) => !table.secured || !table.forced)).toEqual([]);
    const names = new Set((await listTables()).map((table) => table.name));
    expect(Object.keys(WITHOUT_WALL).filter((name) => !names.has(name))).toEqual([]);
  });

  it("shows no row of any table where neither lab nor account is set", async () => {
    for (const { name } of await walled()) {
      const seen = await bench.app.transaction().execute((trx) => count(trx, name));
      expect([name, seen]).toEqual([name, 0]);
    }
  });

  it("forgets the lab with the transaction", async () => {
    const single = bench.app;
    await inLab(single, own.admin, async () => undefined);
    const left = await sql<{ lab: string | null }>`
      select nullif(current_setting('tidemark.lab', true), '') as lab`.execute(single);
    expect(left.rows[0]?.lab).toBeNull();
  });

  it("shows a lab its own rows in every lab table and nobody else's", async () => {
    for (const table of await walled()) {
      if (!table.lab) continue;
      const { rows } = await inLab(bench.app, own.admin, (trx) =>
        sql<{ lab_id: string }>`select distinct lab_id from ${sql.table(table.name)}`.execute(trx),
      );
      expect([table.name, rows.map((row) => row.lab_id)]).toEqual([table.name, [own.id]]);
    }
  });

  it("shows an account only itself and its labs where no lab is set", async () => {
    const seen: Record<string, number | undefined> = {};
    await asAccount(bench.app, own.admin.accountId, async (trx) => {
      for (const { name } of await walled()) {
        const n = await count(trx, name);
        if (n !== 0) seen[name] = n;
      }
    });
    expect(seen).toEqual({
      accounts: 1,
      account_passwords: 1,
      labs: 1,
      memberships: 1,
      sessions: 1,
    });
  });

  it("hides a colleague's password hash", async () => {
    const hashes = await inLab(bench.app, { labId: own.id, accountId: null }, (trx) =>
      trx.selectFrom("account_passwords").selectAll().execute(),
    );
    expect(hashes).toEqual([]);
  });

  it("changes and deletes nothing of another lab", async () => {
    const touched: string[] = [];
    let tried = 0;
    for (const table of await walled()) {
      if (!table.lab) continue;
      for (const verb of ["update", "delete"] as const) {
        const { rows } = await sql<{ may: boolean }>`
          select has_table_privilege('tidemark_app', ${table.name}, ${verb}) as may`.execute(
          bench.app,
        );
        if (rows[0]?.may !== true) continue;
        tried += 1;
        const name = sql.table(table.name);
        const act =
          verb === "update" ? sql`update ${name} set lab_id = lab_id` : sql`delete from ${name}`;
        const done = await inLab(bench.app, own.admin, (trx) =>
          sql`${act} where lab_id = ${other.id}`.execute(trx),
        );
        if (done.numAffectedRows !== 0n) touched.push(`${verb} ${table.name}`);
      }
    }
    expect(touched).toEqual([]);
    expect(tried).toBeGreaterThan(15);
  });

  it("refuses to move a row into another lab, table by table", async () => {
    for (const table of await walled()) {
      if (!table.lab) continue;
      const moving = inLab(bench.app, own.admin, (trx) =>
        sql`update ${sql.table(table.name)} set lab_id = ${other.id} where lab_id = ${own.id}`.execute(
          trx,
        ),
      );
      // Policy, foreign key or missing grant, whichever comes first.
      const refusal = await moving.then(
        () => "moved",
        (error: unknown) => String(error),
      );
      expect(`${table.name}: ${refusal}`).toMatch(
        /row-level security|foreign key|permission denied/,
      );
    }
  });

  it("refuses rows of another lab on insert", async () => {
    const insert = inLab(bench.app, own.admin, (trx) =>
      trx
        .insertInto("recordings")
        .values({ lab_id: other.id, digest: "d".repeat(64), bytes: 1, media: "x" })
        .execute(),
    );
    await expect(insert).rejects.toThrow(/row-level security/);
  });

  it.each([
    ["series of another lab's loudspeaker", "loudspeaker"],
    ["run of another lab's series", "run"],
    ["session in a lab one is no member of", "session"],
  ])("refuses a %s by its foreign key", async (_name, kind) => {
    const { accountId } = own.admin;
    const insert = inLab(bench.app, own.admin, async (trx) => {
      if (kind === "loudspeaker") {
        await sql`insert into series (lab_id, number, loudspeaker_id, plan, created_by)
          values (${own.id}, 999, ${otherSeries.loudspeakerId}, '{}', ${accountId})`.execute(trx);
      } else if (kind === "run") {
        await sql`insert into runs (lab_id, series_id, file_name, digest, uploaded_by)
          values (${own.id}, ${otherSeries.seriesId}, 'a', ${otherSeries.digest}, ${accountId})`.execute(
          trx,
        );
      } else {
        await createSession(trx, { accountId, labId: other.id, userAgent: "", ip: "" });
      }
    });
    await expect(insert).rejects.toThrow(/foreign key/);
  });
});
