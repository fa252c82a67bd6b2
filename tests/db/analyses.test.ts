/** From queued to done, and everything that can come between. */
import { sql } from "kysely";
import { beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { Trx } from "../../db/client";
import { inLab } from "../../db/in-lab";
import {
  cancelAnalysis,
  claimAnalysis,
  createAnalysis,
  failAnalysis,
  findAnalysisByInputs,
  findForgottenAnalyses,
  getAnalysis,
  listAnalyses,
  releaseAnalysis,
  requeueAnalysis,
  setProgress,
} from "../../db/queries/analyses";
import { getResult, saveResult } from "../../db/queries/results";
import { lockSeries } from "../../db/queries/series";
import type { Failure, Progress } from "../../lib/api/series";
import { toResultText } from "../../lib/result/result-text";
import { makeSampleResult } from "../support/sample-result";
import { type Lab, makeLab, makeSeries, openDatabase } from "./support";

const bench = openDatabase();
let lab: Lab;
let seriesId = "";
let runId = "";
let analysisId = "";
let digestNumber = 0;

const PROGRESS: Progress = { done: 1, total: 6, runs: [] };
const FAILURE: Failure = {
  code: "calibration.missing",
  message: "There is no calibrator recording.",
  slot: null,
  file: null,
  remedy: "Record the calibrator.",
  report: "R-1",
  at: "2026-03-01T10:00:00.000Z",
};

const act = <T>(run: (trx: Trx) => Promise<T>): Promise<T> =>
  inLab(bench.app, { labId: lab.id, accountId: null }, run);

const queue = (inputsDigest: string): Promise<string> =>
  act(async (trx) => {
    await lockSeries(trx, lab.id, seriesId);
    return createAnalysis(trx, lab.id, {
      seriesId,
      inputs: { series: { loudspeaker: "Osier" }, files: [] },
      inputsDigest,
      settings: { criteria: [{ thd_percent: 3 }] },
      engineVersion: "1.0.0",
      requestedBy: lab.admin.accountId,
    });
  });

const claim = (staleAfterS = 10) =>
  act((trx) => claimAnalysis(trx, lab.id, analysisId, staleAfterS));
const save = () =>
  act((trx) =>
    saveResult(
      trx,
      lab.id,
      analysisId,
      makeSampleResult(),
      new Map([[makeSampleResult().runs[0]?.file ?? "", runId]]),
    ),
  );
const state = async () => (await act((trx) => getAnalysis(trx, lab.id, analysisId))).state;

/** Everything that a result left, as text, in a fixed order. */
const dump = () =>
  act(async (trx) => {
    const { rows } = await sql<{ line: string }>`
      select concat_ws(' ', position, run_id, payload) as line from analysis_runs
        where analysis_id = ${analysisId}
      union all select concat_ws(' ', position, nominal_hz, exact_hz, cause, onset_status, onset_db, payload)
        from analysis_bands where analysis_id = ${analysisId}
      union all select head::text from analyses where id = ${analysisId} order by 1`.execute(trx);
    return rows.map((row) => row.line);
  });

beforeAll(async () => {
  lab = await makeLab(bench, "analyses");
  ({ seriesId, runId } = await makeSeries(bench, lab));
});

beforeEach(async () => {
  digestNumber += 1;
  analysisId = await queue(String(digestNumber).padStart(64, "0"));
});

describe("a version", () => {
  it("is counted per series and found by its inputs", async () => {
    const digest = String(digestNumber).padStart(64, "0");
    const versions = (await act((trx) => listAnalyses(trx, lab.id, seriesId))).map(
      (row) => row.version,
    );
    expect(versions).toEqual(Array.from(versions, (_, at) => versions.length - at));
    const find = (engineVersion: string) =>
      act((trx) =>
        findAnalysisByInputs(trx, lab.id, { seriesId, inputsDigest: digest, engineVersion }),
      );
    expect((await find("1.0.0"))?.id).toBe(analysisId);
    expect(await find("1.0.1")).toBeNull();
    await expect(queue(digest)).rejects.toThrow(/analyses_series_id_inputs_digest/);
  });

  it("is counted without gap or clash by askers at the same time", async () => {
    const before = (await act((trx) => listAnalyses(trx, lab.id, seriesId))).length;
    const digests = Array.from({ length: 6 }, (_, at) => `f${at}${digestNumber}`.padEnd(64, "0"));
    await Promise.all(digests.map(queue));
    const versions = (await act((trx) => listAnalyses(trx, lab.id, seriesId))).map(
      (row) => row.version,
    );
    expect(versions).toHaveLength(before + 6);
    expect(new Set(versions).size).toBe(versions.length);
    expect(Math.max(...versions)).toBe(versions.length);
  });
});

describe("the work on it", () => {
  it("is one worker's at a time", async () => {
    const claims = await Promise.all([claim(), claim(), claim()]);
    expect(claims.filter(Boolean)).toHaveLength(1);
    expect(await act((trx) => getAnalysis(trx, lab.id, analysisId))).toMatchObject({
      state: "running",
      attempts: 1,
    });
  });

  it("passes to another worker once the first has been silent", async () => {
    await claim();
    expect(await claim(10)).toBe(false);
    await act((trx) =>
      sql`update analyses set heartbeat_at = now() - interval '11 seconds'
        where id = ${analysisId}`.execute(trx),
    );
    expect(await claim(10)).toBe(true);
    expect(await claim(10)).toBe(false);
    expect((await act((trx) => getAnalysis(trx, lab.id, analysisId))).attempts).toBe(2);
  });

  it("goes back to the queue", async () => {
    await claim();
    await act((trx) => releaseAnalysis(trx, lab.id, analysisId));
    expect(await state()).toBe("queued");
    expect(await claim()).toBe(true);
  });

  it("says where it stands until it is cancelled", async () => {
    await claim();
    const step = () => act((trx) => setProgress(trx, lab.id, analysisId, PROGRESS));
    expect(await step()).toBe(true);
    expect((await act((trx) => getAnalysis(trx, lab.id, analysisId))).progress).toEqual(PROGRESS);
    expect(await act((trx) => cancelAnalysis(trx, lab.id, analysisId))).toBe(true);
    expect(await step()).toBe(false);
    expect(await save()).toBe(false);
    expect(await dump()).toEqual([null]);
    expect(await state()).toBe("cancelled");
  });

  it("fails with its reason, and may be tried again under its number", async () => {
    await claim();
    expect(await act((trx) => failAnalysis(trx, lab.id, analysisId, FAILURE))).toBe(true);
    const failed = await act((trx) => getAnalysis(trx, lab.id, analysisId));
    expect(failed).toMatchObject({ state: "failed", error: FAILURE });
    expect(await claim()).toBe(false);
    expect(await act((trx) => failAnalysis(trx, lab.id, analysisId, FAILURE))).toBe(false);
    await act((trx) => requeueAnalysis(trx, lab.id, analysisId, null));
    const again = await act((trx) => getAnalysis(trx, lab.id, analysisId));
    expect(again).toMatchObject({ state: "queued", error: null, version: failed.version });
  });

  it("is found by the sweep when nobody does it", async () => {
    const forgotten = async (seconds: number) =>
      (await findForgottenAnalyses(bench.app, seconds)).some(
        (row) => row.analysisId === analysisId && row.labId === lab.id,
      );
    expect(await forgotten(60)).toBe(false);
    await act((trx) =>
      sql`update analyses set requested_at = now() - interval '61 seconds'
        where id = ${analysisId}`.execute(trx),
    );
    expect(await forgotten(60)).toBe(true);
    await claim();
    expect(await forgotten(60)).toBe(false);
    await save();
    expect(await forgotten(0)).toBe(false);
  });
});

describe("a result", () => {
  it("comes back as the very text that the engine's would give", async () => {
    await claim();
    expect(await save()).toBe(true);
    const stored = await act((trx) => getResult(trx, lab.id, analysisId));
    expect(toResultText(stored)).toBe(toResultText(makeSampleResult()));
    expect(toResultText(stored).length).toBeGreaterThan(10_000);
  });

  it("is not there before the end, nor half", async () => {
    const read = () => act((trx) => getResult(trx, lab.id, analysisId));
    await expect(read()).rejects.toMatchObject({ code: "conflict.state" });
    await claim();
    const broken = act(async (trx) => {
      await saveResult(trx, lab.id, analysisId, makeSampleResult(), new Map());
      throw new Error("the power went");
    });
    await expect(broken).rejects.toThrow("the power went");
    expect(await dump()).toEqual([null]);
    expect(await state()).toBe("running");
    await expect(read()).rejects.toMatchObject({ code: "conflict.state" });
  });

  it("leaves the same rows when the work is done twice", async () => {
    await claim();
    await save();
    const first = await dump();
    expect(first.length).toBeGreaterThan(20);
    expect(await save()).toBe(false);
    await act((trx) =>
      sql`update analyses set state = 'running' where id = ${analysisId}`.execute(trx),
    );
    expect(await save()).toBe(true);
    expect(await dump()).toEqual(first);
  });

  it("of another lab does not exist", async () => {
    const other = await makeLab(bench, `other-${digestNumber}`);
    const read = inLab(bench.app, other.admin, (trx) => getResult(trx, lab.id, analysisId));
    await expect(read).rejects.toMatchObject({ code: "not-found" });
  });
});
