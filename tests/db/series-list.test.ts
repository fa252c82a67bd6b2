import { sql } from "kysely";
import { beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { updateLoudspeaker } from "../../db/queries/loudspeakers";
import { listSeries, type SeriesFilter, type SeriesOrder } from "../../db/queries/series-list";
import { createSeries, toSeriesNumber, updatePlan, updateSeries } from "../../db/queries/series";
import { planSchema } from "../../lib/series/plan-schema";
import { type Lab, makeLab, makeSeries, openDatabase } from "./support";

const bench = openDatabase();
let lab: Lab;
let small: Lab;
let large: Lab;
let first: Awaited<ReturnType<typeof makeSeries>>;

const ALL: SeriesFilter = { search: "", archived: false };
const BY_NUMBER: SeriesOrder = { sort: "number", direction: "up" };

const list = (
  of: Lab,
  filter: Partial<SeriesFilter> = {},
  order = BY_NUMBER,
  page = 1,
  pageSize = 25,
) =>
  inLab(bench.app, of.admin, (trx) =>
    listSeries(trx, of.id, { ...ALL, ...filter }, order, { page, pageSize }),
  );

async function multiply(of: Lab, count: number): Promise<void> {
  const { loudspeakerId } = await makeSeries(bench, of);
  await sql`alter table series disable trigger take_name`.execute(bench.owner);
  await inLab(bench.app, of.admin, (trx) =>
    sql`insert into series (lab_id, number, loudspeaker_id, loudspeaker_name, state, plan, created_by,
        changed_by, changed_at, reached_db)
      select ${of.id}::uuid, n, ${loudspeakerId}::uuid, 'Withy ' || md5(n::text),
        (array['planned', 'capturing', 'analysing', 'in review', 'signed off'])[1 + n % 5],
        ${JSON.stringify(planSchema.parse({}))}::jsonb, ${of.admin.accountId}::uuid,
        ${of.admin.accountId}::uuid, now() - n * interval '1 minute', 80 + n % 30
      from generate_series(2, ${count}::int) n`.execute(trx),
  );
  await sql`alter table series enable trigger take_name`.execute(bench.owner);
}

beforeAll(async () => {
  lab = await makeLab(bench, "list");
  first = await makeSeries(bench, lab, "Osier 5A");
  await makeSeries(bench, lab, "Rush 8");
  await makeSeries(bench, lab, "Alder 4");
  small = await makeLab(bench, "small");
  large = await makeLab(bench, "large");
  await multiply(small, 100);
  await multiply(large, 10_000);
  // What autovacuum does within a minute of such an insert.
  await sql`vacuum analyze series`.execute(bench.owner);
});

describe("the list of series", () => {
  it("numbers series per lab", async () => {
    const { rows } = await list(lab);
    expect(rows.map((row) => toSeriesNumber(row.number))).toEqual(["S-0001", "S-0002", "S-0003"]);
    expect(toSeriesNumber(12_345)).toBe("S-12345");
  });

  it("gives numbers once, to whoever asks at the same time", async () => {
    const crowd = await makeLab(bench, "crowd");
    const { loudspeakerId } = await makeSeries(bench, crowd);
    const made = await Promise.all(
      Array.from({ length: 8 }, () =>
        inLab(bench.app, crowd.admin, (trx) =>
          createSeries(trx, crowd.id, crowd.admin.accountId, {
            loudspeakerId,
            plan: planSchema.parse({}),
          }),
        ),
      ),
    );
    expect(made.map((one) => one.number).toSorted((a, b) => a - b)).toEqual([
      2, 3, 4, 5, 6, 7, 8, 9,
    ]);
  });

  it("carries loudspeaker, live recordings and who changed it", async () => {
    const { rows } = await list(lab, { search: "osier" });
    expect(rows).toHaveLength(1);
    expect(rows[0]).toMatchObject({
      loudspeaker: { maker: "Withy", model: "Osier 5A" },
      liveRuns: [{ slot: "short-76", state: "checking", levelDb: 76 }],
      excusedSlots: [],
      changedBy: { id: lab.admin.accountId },
    });
  });

  it.each([
    ["withy rush", [2]],
    ["S-0003", [3]],
    ["RUSH s-0002", [2]],
    ["rush s-0003", []],
    ["%", []],
    ["", [1, 2, 3]],
  ])("finds %j", async (search, numbers) => {
    const { rows, found, total } = await list(lab, { search });
    expect(rows.map((row) => row.number)).toEqual(numbers);
    expect([found, total]).toEqual([numbers.length, 3]);
  });

  it("counts by state under the search but not under the state filter", async () => {
    await inLab(bench.app, lab.admin, (trx) =>
      updateSeries(trx, lab.id, first.seriesId, { state: "in review" }),
    );
    const page = await list(lab, { state: "in review" });
    expect(page.rows.map((row) => row.number)).toEqual([1]);
    expect(page).toMatchObject({ found: 1, total: 3, byState: { "in review": 1, planned: 2 } });
  });

  it("follows the loudspeaker's name", async () => {
    await inLab(bench.app, lab.admin, (trx) =>
      updateLoudspeaker(trx, lab.id, first.loudspeakerId, { model: "Osier 5B" }),
    );
    expect((await list(lab, { search: "5b" })).rows.map((row) => row.number)).toEqual([1]);
    expect((await list(lab, { search: "5a" })).rows).toEqual([]);
  });

  it("keeps archived series apart", async () => {
    await inLab(bench.app, lab.admin, (trx) =>
      updateSeries(trx, lab.id, first.seriesId, { archivedAt: new Date() }),
    );
    expect((await list(lab)).rows.map((row) => row.number)).toEqual([2, 3]);
    const archive = await list(lab, { archived: true });
    expect(archive.rows.map((row) => row.number)).toEqual([1]);
    expect(archive.total).toBe(2);
  });

  it.each(["changed", "name", "number", "state", "reached"] as const)(
    "pages by %s without a gap or an overlap, both ways",
    async (sort) => {
      for (const direction of ["up", "down"] as const) {
        const numbers: number[] = [];
        for (let page = 1; page <= 4; page += 1) {
          const { rows } = await list(small, {}, { sort, direction }, page, 30);
          numbers.push(...rows.map((row) => row.number));
        }
        expect(numbers).toHaveLength(100);
        expect(new Set(numbers).size).toBe(100);
      }
    },
  );

  it("sorts states in the order of a series' life", async () => {
    const { rows } = await list(small, {}, { sort: "state", direction: "up" }, 1, 100);
    const states = rows.map((row) => row.state).filter((state, at, all) => state !== all[at - 1]);
    expect(states).toEqual(["planned", "capturing", "analysing", "in review", "signed off"]);
  });

  it("reads a page of ten thousand by an index, whatever the order", async () => {
    for (const sort of ["changed", "name", "number", "state", "reached"] as const) {
      const plan = await inLab(bench.app, large.admin, async (trx) => {
        const column = {
          changed: "changed_at desc, number desc",
          name: "lower(loudspeaker_name) asc, number desc",
          number: "number desc",
          state: "state_order desc, number desc",
          reached: "reached_db desc nulls last, number desc",
        }[sort];
        const { rows } = await sql<{ "QUERY PLAN": string }>`explain select id from series
          where lab_id = ${large.id} and archived_at is null order by ${sql.raw(column)} limit 25`.execute(
          trx,
        );
        return rows.map((row) => row["QUERY PLAN"]).join("\n");
      });
      expect(plan).toMatch(/Index (Only )?Scan/);
      expect(plan).not.toMatch(/\bSort\b|Seq Scan/);
    }
  });
});

describe("a plan", () => {
  it("is changed once per version read", async () => {
    const { seriesId } = await makeSeries(bench, lab, "Sedge 6");
    const change = (planVersion: number) =>
      inLab(bench.app, lab.admin, (trx) =>
        updatePlan(trx, lab.id, lab.admin.accountId, {
          seriesId,
          plan: planSchema.parse({ closing: false }),
          planVersion,
        }),
      );
    await change(1);
    await expect(change(1)).rejects.toMatchObject({
      code: "conflict.changed",
      details: { plan_version: 2 },
    });
    await change(2);
  });
});
