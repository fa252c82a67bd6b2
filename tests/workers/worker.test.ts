/** What the worker survives: killed in each stage, forgotten jobs, a database that restarts. */
import { setTimeout as sleep } from "node:timers/promises";
import { rm } from "node:fs/promises";
import { sql } from "kysely";
import pg from "pg";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { getAnalysis as getAnalysisRow } from "../../db/queries/analyses";
import { getResult, listAnalyses, startAnalysis } from "../../lib/api/analyses";
import { requestApi } from "../../lib/api/client";
import { actOnRun, getRun, listRuns } from "../../lib/api/runs";
import { getSeries, updateCriteria, type SeriesView } from "../../lib/api/series";
import { childrenOf, endLife, livingPid, slowDown } from "../support/processes";
import { getTestSeries } from "../support/test-series";
import { uploadWhole } from "../support/tus";
import {
  call,
  openApiBench,
  planTestSeries,
  seriesInState,
  target,
  until,
  type ApiBench,
} from "../api/support";

let bench: ApiBench;
let series: SeriesView;
/** What an undisturbed analysis of the test series gives. */
let reference = "";

beforeAll(async () => {
  bench = await openApiBench();
  series = await captured();
  reference = await resultOf(series);
});
afterAll(() => bench.stop());

async function captured(): Promise<SeriesView> {
  const planned = await planTestSeries(bench);
  for (const { name, bytes } of getTestSeries().files) {
    await uploadWhole(target(bench), bytes, { seriesId: planned.id, fileName: name });
  }
  return seriesInState(bench, planned.id, "in review");
}

async function resultOf(of: SeriesView): Promise<string> {
  const { latest_done_analysis: done } = await call(bench, getSeries, {
    params: { seriesId: of.id },
  });
  const params = { analysisId: done?.id ?? "" };
  const options = { baseUrl: bench.product.url, token: bench.all.token };
  return (await requestApi(getResult, { params }, options)).text();
}

/** Takes the result away and asks for it anew, so that the same row is computed again. */
async function forget(analysisId: string): Promise<void> {
  await inLab(bench.app, bench.all.scope, async (trx) => {
    await trx.deleteFrom("analysis_runs").where("analysis_id", "=", analysisId).execute();
    await trx.deleteFrom("analysis_bands").where("analysis_id", "=", analysisId).execute();
    await trx
      .updateTable("analyses")
      .set({ state: "cancelled", head: null, progress: null })
      .where("id", "=", analysisId)
      .execute();
  });
}

const rowOf = (analysisId: string) =>
  inLab(bench.app, bench.all.scope, (trx) => getAnalysisRow(trx, bench.labId, analysisId));

const countParts = (analysisId: string): Promise<number> =>
  inLab(bench.app, bench.all.scope, async (trx) => {
    const { rows } = await sql<{ n: number }>`
      select (select count(*) from analysis_runs where analysis_id = ${analysisId})
           + (select count(*) from analysis_bands where analysis_id = ${analysisId}) as n`.execute(
      trx,
    );
    return rows[0]?.n ?? -1;
  });

/** @returns whether the stage was seen, and the worker killed in it. */
async function killAt(id: string, stage: string): Promise<boolean> {
  await forget(id);
  const workerPid = await livingPid(bench.product.worker);
  const goOn = slowDown(workerPid, 0.05);
  try {
    await call(bench, startAnalysis, { params: { seriesId: series.id } });
    const { state } = await until(
      bench,
      () => rowOf(id),
      (row) => {
        const states = row.progress?.runs.flatMap((run) => run.stages) ?? [];
        if (row.state === "done") return true;
        if (stage === "claimed") return row.state === "running";
        if (stage === "levels and onset") {
          return states.length > 0 && states.every((one) => one.state === "done");
        }
        return states.some((one) => one.stage === stage && one.state !== "waiting");
      },
    );
    if (state === "done") return false;
    const computing = childrenOf(workerPid);
    process.kill(workerPid, "SIGKILL");
    computing.forEach((pid) => process.kill(pid, "SIGKILL"));
    return true;
  } finally {
    goOn();
  }
}

describe("a worker that is killed", () => {
  const stages = ["aligned", "harmonics", "floor"] as const;

  it.each(["claimed", ...stages, "levels and onset"] as const)(
    "while an analysis is %s: it is taken up again and gives the same rows",
    async (stage) => {
      const { id } = series.latest_done_analysis ?? { id: "" };
      // On a busy machine an analysis may be over between two looks: then it is begun again.
      let caught = false;
      for (let attempt = 0; attempt < 10 && !caught; attempt += 1) caught = await killAt(id, stage);
      if (!caught) throw new Error(`it was done before ${stage} was seen, ten times`);
      const killedAt = Date.now();
      expect(await countParts(id)).toBe(0);
      const row = await until(
        bench,
        () => rowOf(id),
        ({ state }) => state === "done",
      );
      expect(Date.now() - killedAt).toBeLessThan(20_000);
      expect(row.attempts).toBe(2);
      expect(await resultOf(series)).toBe(reference);
      expect((await call(bench, getSeries, { params: { seriesId: series.id } })).state).toBe(
        "in review",
      );
    },
  );

  it("while a recording is checked: the check is made again", async () => {
    const workerPid = await livingPid(bench.product.worker);
    const goOn = slowDown(workerPid, 0.05);
    const { runs } = await call(bench, listRuns, { params: { seriesId: series.id } });
    // The loudest one: all that it is held against was there when it first came.
    const run = runs.find((one) => one.slot === "short-86");
    try {
      await call(bench, actOnRun, {
        params: { runId: run?.id ?? "" },
        body: { act: "check-again" },
      });
      await sleep(150);
      const computing = childrenOf(workerPid);
      process.kill(workerPid, "SIGKILL");
      computing.forEach((pid) => process.kill(pid, "SIGKILL"));
    } finally {
      goOn();
    }
    const again = await until(
      bench,
      () => call(bench, getRun, { params: { runId: run?.id ?? "" } }),
      ({ state }) => state !== "checking",
    );
    expect([again.state, again.report]).toEqual([run?.state, run?.report]);
  });
});

describe("a worker that is asked to end", () => {
  it("finishes what it is at, or gives it back", async () => {
    const { id } = series.latest_done_analysis ?? { id: "" };
    await forget(id);
    await call(bench, startAnalysis, { params: { seriesId: series.id } });
    await until(
      bench,
      () => rowOf(id),
      ({ state }) => state === "running" || state === "done",
    );
    await endLife(bench.product.worker, "SIGTERM");
    await until(
      bench,
      () => rowOf(id),
      ({ state }) => state === "done",
    );
    expect(await resultOf(series)).toBe(reference);
  });
});

describe("work whose job was lost", () => {
  it("is found by its rows", async () => {
    const { id } = series.latest_done_analysis ?? { id: "" };
    const { runs } = await call(bench, listRuns, { params: { seriesId: series.id } });
    const runId = runs.find((one) => one.slot === "ambient")?.id ?? "";
    await forget(id);
    // As if the web server had died between its commit and the queue, some time ago.
    await inLab(bench.app, bench.all.scope, async (trx) => {
      const ago = new Date(Date.now() - 60_000);
      await trx
        .updateTable("analyses")
        .set({ state: "queued", requested_at: ago })
        .where("id", "=", id)
        .execute();
      await trx
        .updateTable("runs")
        .set({ state: "checking", changed_at: ago })
        .where("id", "=", runId)
        .execute();
    });
    await until(
      bench,
      () => rowOf(id),
      ({ state }) => state === "done",
    );
    const run = await until(
      bench,
      () => call(bench, getRun, { params: { runId } }),
      ({ state }) => state !== "checking",
    );
    expect(run.state).toBe("passed");
    expect(await resultOf(series)).toBe(reference);
  });
});

describe("a database that drops every connection", () => {
  it("is waited for: the work goes on, and so does what listens", async () => {
    const { id } = series.latest_done_analysis ?? { id: "" };
    await forget(id);
    const workerPid = await livingPid(bench.product.worker);
    const goOn = slowDown(workerPid, 0.2);
    try {
      await call(bench, startAnalysis, { params: { seriesId: series.id } });
      await until(
        bench,
        () => rowOf(id),
        ({ state }) => state === "running",
      );
      await dropConnections();
    } finally {
      goOn();
    }
    await until(
      bench,
      () => rowOf(id).catch(() => null),
      (row) => row?.state === "done",
    );
    expect(await resultOf(series)).toBe(reference);
    // Idle connections too, those of this test among them: the next job is heard of all the same.
    await dropConnections();
    await until(
      bench,
      () =>
        forget(id).then(
          () => true,
          () => false,
        ),
      (forgotten) => forgotten,
    );
    await until(
      bench,
      () => call(bench, startAnalysis, { params: { seriesId: series.id } }).catch(() => null),
      (answer) => answer !== null,
    );
    await until(
      bench,
      () => rowOf(id).catch(() => null),
      (row) => row?.state === "done",
    );
    expect(await resultOf(series)).toBe(reference);
    expect(bench.product.worker.pid()).toBe(workerPid);
  });
});

/** What a restart of PostgreSQL looks like from the other end. */
async function dropConnections(): Promise<void> {
  const client = new pg.Client({
    connectionString: bench.database.connectionString("superuser"),
  });
  await client.connect();
  const { rowCount } = await client.query(
    `select pg_terminate_backend(pid) from pg_stat_activity
      where datname = current_database() and pid <> pg_backend_pid() and backend_type = 'client backend'`,
  );
  expect(rowCount).toBeGreaterThan(3);
  await client.end();
}

describe("an analysis that is no longer wanted", () => {
  it("ends as cancelled when newer inputs replace it, and leaves nothing", async () => {
    const workerPid = await livingPid(bench.product.worker);
    const goOn = slowDown(workerPid, 0.1);
    const params = { seriesId: series.id };
    try {
      const { plan_version, plan } = await call(bench, getSeries, { params });
      const criteria = [{ thd_percent: 5 }];
      await call(bench, updateCriteria, { params, body: { criteria, plan_version } });
      const unwanted = await call(bench, startAnalysis, { params });
      await until(
        bench,
        () => rowOf(unwanted.id),
        ({ state }) => state === "running",
      );
      await call(bench, updateCriteria, {
        params,
        body: { criteria: plan.criteria, plan_version: plan_version + 1 },
      });
      const wanted = await call(bench, startAnalysis, { params });
      expect(wanted.id).toBe(series.latest_done_analysis?.id);
      expect((await rowOf(unwanted.id)).state).toBe("cancelled");
      goOn();
      await sleep(3000);
      expect((await rowOf(unwanted.id)).state).toBe("cancelled");
      expect(await countParts(unwanted.id)).toBe(0);
    } finally {
      goOn();
    }
    expect((await call(bench, getSeries, { params })).state).toBe("in review");
    expect((await call(bench, listAnalyses, { params })).analyses).toHaveLength(2);
  });
});

describe("an analysis that cannot be done", () => {
  it("fails at once, in the tester's words, with run and remedy", async () => {
    const hopeless = await planTestSeries(bench);
    const params = { seriesId: hopeless.id };
    const { files } = getTestSeries();
    const noise = files.find((one) => one.slot === "ambient")?.bytes ?? new Uint8Array();
    for (const { slot, name, bytes } of files) {
      const runId = await uploadWhole(target(bench), slot === "short-86" ? noise.slice() : bytes, {
        seriesId: hopeless.id,
        fileName: name,
      });
      const run = await until(
        bench,
        () => call(bench, getRun, { params: { runId } }),
        ({ state }) => state !== "checking",
      );
      if (run.state === "failed") {
        await call(bench, actOnRun, {
          params: { runId },
          body: { act: "keep", reason: "to see what happens" },
        });
      }
    }
    const failed = await seriesInState(bench, hopeless.id, "analysis failed", "in review");
    expect(failed.state).toBe("analysis failed");
    expect(failed.failure).toMatchObject({ slot: "short-86", file: "brackenmini_86_short.wav" });
    expect(failed.failure?.code).toMatch(/^run\./);
    expect(failed.failure?.remedy).toContain("same gain");
    expect(failed.failure?.report).toMatch(/^[0-9A-F]{4}-1\.1$/);
    const [analysis] = (await call(bench, listAnalyses, { params })).analyses;
    expect(analysis?.state).toBe("failed");
    expect(await countParts(analysis?.id ?? "")).toBe(0);
  });

  it("comes back as failed where bytes are missing, after some tries", async () => {
    // Left to the queue's back-off: 2, 4 and 8 s between tries.
    const lost = await planTestSeries(bench);
    const { files } = getTestSeries();
    for (const { name, bytes } of files) {
      const own = bytes.slice();
      own[own.length - 1] = (own.at(-1) ?? 0) ^ 1;
      await uploadWhole(target(bench), own, { seriesId: lost.id, fileName: name });
    }
    const done = await seriesInState(bench, lost.id, "in review");
    const { runs } = await call(bench, listRuns, { params: { seriesId: lost.id } });
    const digest = runs.find((run) => run.slot === "short-86")?.digest ?? "";
    await rm(`${bench.product.dataDir}/recordings/${digest.slice(0, 2)}/${digest.slice(2)}`);
    await forget(done.latest_done_analysis?.id ?? "");
    await call(bench, startAnalysis, { params: { seriesId: lost.id } });
    const failed = await seriesInState(bench, lost.id, "analysis failed");
    expect(failed.failure).toMatchObject({ code: "storage.missing" });
    expect(failed.failure?.remedy).toContain("backup");
  });
});
