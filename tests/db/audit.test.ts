import { sql } from "kysely";
import { beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { listLabEvents, listSeriesEvents, recordEvent } from "../../db/queries/audit";
import { type Lab, makeLab, makeSeries, openDatabase } from "./support";

const bench = openDatabase();
let lab: Lab;
let seriesId = "";

beforeAll(async () => {
  lab = await makeLab(bench, "trail");
  ({ seriesId } = await makeSeries(bench, lab));
  for (const act of ["series.created", "run.uploaded", "member.joined"]) {
    await inLab(bench.app, lab.admin, (trx) =>
      recordEvent(trx, lab.admin, {
        act,
        subjectType: "thing",
        subjectId: "1",
        ...(act === "member.joined" ? {} : { seriesId }),
        details: { figure: 3 },
      }),
    );
  }
});

describe("the audit trail", () => {
  it("reads newest first, with the name of who acted", async () => {
    const events = await inLab(bench.app, lab.admin, (trx) =>
      listSeriesEvents(trx, lab.id, seriesId),
    );
    expect(events.map((event) => event.act)).toEqual(["run.uploaded", "series.created"]);
    expect(events[0]).toMatchObject({ name: "admin@trail.test", details: { figure: 3 } });
  });

  it("pages by event", async () => {
    const page = (before?: number) =>
      inLab(bench.app, lab.admin, (trx) => listLabEvents(trx, lab.id, { before, limit: 2 }));
    const first = await page();
    const second = await page(first.at(-1)?.id);
    expect([...first, ...second].map((event) => event.act)).toEqual([
      "member.joined",
      "run.uploaded",
      "series.created",
    ]);
  });

  it.each([
    "update audit_events set act = 'x'",
    "delete from audit_events",
    "truncate audit_events",
  ])("refuses the application and the owner: %s", async (statement) => {
    await expect(
      inLab(bench.app, lab.admin, (trx) => sql.raw(statement).execute(trx)),
    ).rejects.toThrow(/permission denied/);
    // The owner sees no rows to change; what is tried on the whole table meets the trigger.
    const before = await inLab(bench.app, lab.admin, (trx) =>
      listLabEvents(trx, lab.id, { limit: 10 }),
    );
    await sql
      .raw(statement)
      .execute(bench.owner)
      .catch(() => undefined);
    const after = await inLab(bench.app, lab.admin, (trx) =>
      listLabEvents(trx, lab.id, { limit: 10 }),
    );
    expect(after).toEqual(before);
    expect(after).toHaveLength(3);
  });

  it("refuses a change even to a role that no wall binds", async () => {
    const superuser = bench.database.connectionString("superuser");
    const { default: pg } = await import("pg");
    const client = new pg.Client({ connectionString: superuser });
    await client.connect();
    try {
      for (const statement of ["update audit_events set act = 'x'", "delete from audit_events"]) {
        await expect(client.query(statement)).rejects.toThrow(/append only/);
      }
    } finally {
      await client.end();
    }
  });
});
