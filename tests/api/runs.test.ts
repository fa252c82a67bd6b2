import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { readWav } from "../../lib/audio/read-wav";
import { toByteSource } from "../../lib/audio/byte-source";
import { followSeries, startAnalysis } from "../../lib/api/analyses";
import { requestApi } from "../../lib/api/client";
import { actOnRun, downloadRun, excuseSlot, getRun, listRuns, removeRun } from "../../lib/api/runs";
import type { RunAct, RunView } from "../../lib/api/runs";
import {
  getSeriesHistory,
  getStimulus,
  getStimulusZip,
  removeSeries,
  restoreSeries,
  updateCriteria,
  updatePlan,
  type SeriesView,
} from "../../lib/api/series";
import { planSchema } from "../../lib/series/plan-schema";
import { getTestSeries, type TestFile } from "../support/test-series";
import { uploadWhole } from "../support/tus";
import { unzip } from "../support/unzip";
import {
  call,
  openApiBench,
  planTestSeries,
  problemOf,
  seriesInState,
  target,
  until,
  type ApiBench,
} from "./support";

let bench: ApiBench;
beforeAll(async () => {
  bench = await openApiBench();
});
afterAll(() => bench.stop());

const file = (slot: string): TestFile => {
  const found = getTestSeries().files.find((one) => one.slot === slot);
  if (found === undefined) throw new Error(`no recording for ${slot}`);
  return found;
};
/** Square tops: what an overdriven input gives. */
function clipped(one: TestFile): Uint8Array<ArrayBuffer> {
  const bytes = one.bytes.slice();
  for (let at = 44 + 3 * 40_000; at < 44 + 3 * 40_020; at += 3) bytes.set([0xff, 0xff, 0x7f], at);
  return bytes;
}
const send = (series: SeriesView, name: string, bytes: Uint8Array<ArrayBuffer>, slot?: string) =>
  uploadWhole(target(bench), bytes, {
    seriesId: series.id,
    fileName: name,
    ...(slot === undefined ? {} : { slot }),
  });
const act = (runId: string, body: RunAct) => call(bench, actOnRun, { params: { runId }, body });
const checked = (runId: string): Promise<RunView> =>
  until(
    bench,
    () => call(bench, getRun, { params: { runId } }),
    (run) => run.state !== "checking",
  );
const runsOf = (series: SeriesView) => call(bench, listRuns, { params: { seriesId: series.id } });

describe("a take that fails its checks", () => {
  it("is kept with a reason, withdrawn, replaced; the ladder follows, the analysis starts by excuse", async () => {
    const series = await planTestSeries(bench);
    const params = { seriesId: series.id };
    for (const slot of ["calibrator-before", "ambient"])
      await send(series, file(slot).name, file(slot).bytes);
    const bad = await checked(await send(series, "76.wav", clipped(file("short-76"))));
    expect([bad.state, bad.slot, bad.take]).toEqual(["failed", "short-76", 1]);
    const fault = bad.report?.checks.find((check) => check.verdict === "fail");
    expect(fault?.code).toBe("clipping");
    expect(fault?.remedy).toContain("record the calibrator again and repeat every level");

    // The next level waits, and says why.
    const waiting = await checked(await send(series, "86.wav", file("short-86").bytes));
    expect(waiting.slot).toBeNull();
    expect(waiting.reason).toContain("locked until 76 dB has passed");
    expect((await problemOf(act(waiting.id, { act: "assign", slot: "short-86" }))).code).toBe(
      "run.locked",
    );

    // Kept with a reason: the level opens and the waiting file moves up by itself.
    expect((await problemOf(act(bad.id, { act: "keep", reason: " " }))).code).toBe(
      "request.invalid",
    );
    const kept = await act(bad.id, { act: "keep", reason: "only the tweeter clipped" });
    expect([kept.state, kept.reason, kept.reason_by?.name]).toEqual([
      "kept",
      "only the tweeter clipped",
      "all",
    ]);
    const moved = await checked(waiting.id);
    expect([moved.slot, moved.reason]).toEqual(["short-86", null]);

    expect((await act(bad.id, { act: "withdraw-keep" })).state).toBe("failed");
    expect((await problemOf(act(bad.id, { act: "withdraw-keep" }))).code).toBe("conflict.state");

    // A better take replaces it; the first one stays in the history.
    const better = await checked(await send(series, "76.wav", file("short-76").bytes));
    expect([better.state, better.take]).toEqual(["passed", 2]);
    const { runs } = await runsOf(series);
    expect(runs.find((run) => run.id === bad.id)?.state).toBe("replaced");
    expect((await problemOf(act(bad.id, { act: "keep", reason: "too late for that" }))).code).toBe(
      "conflict.state",
    );

    const slot = await call(bench, excuseSlot, {
      params: { ...params, slot: "closing-76" },
      body: { reason: "no time left" },
    });
    expect(slot.excused).toBe("no time left");
    const reviewed = await seriesInState(bench, series.id, "in review", "analysis failed");
    expect(reviewed.state).toBe("in review");
    const { events } = await call(bench, getSeriesHistory, { params });
    expect(events.find((event) => event.act === "run.kept")).toMatchObject({
      reason: "only the tweeter clipped",
      who: { name: "all" },
    });
  });
});

describe("recordings by hand", () => {
  it("are assigned, excluded, brought back, checked again and removed", async () => {
    const series = await planTestSeries(bench);
    const strange = await checked(await send(series, "corridor_check.wav", file("short-76").bytes));
    expect(strange.slot).toBeNull();
    expect(strange.reason).toContain("names no planned level");
    expect((await problemOf(act(strange.id, { act: "keep", reason: "why not" }))).code).toBe(
      "conflict.state",
    );
    expect(
      (await problemOf(act(strange.id, { act: "assign", slot: "short-99" }))).errors?.[0]?.path,
    ).toBe("slot");
    await act(strange.id, { act: "assign", slot: "short-76" });
    expect((await checked(strange.id)).slot).toBe("short-76");
    expect((await problemOf(call(bench, removeRun, { params: { runId: strange.id } }))).code).toBe(
      "conflict.state",
    );

    expect((await problemOf(act(strange.id, { act: "choose-channel", channel: 2 }))).code).toBe(
      "audio.channel-missing",
    );
    expect((await act(strange.id, { act: "exclude", reason: "a door was slammed" })).state).toBe(
      "excluded",
    );
    expect((await runsOf(series)).slots.find((slot) => slot.slot === "short-86")?.open).toBe(false);
    expect((await act(strange.id, { act: "bring-back" })).state).toBe("passed");
    await act(strange.id, { act: "check-again" });
    expect((await checked(strange.id)).state).toBe("passed");

    const stray = await send(series, "noise or closing.wav", file("ambient").bytes);
    await call(bench, removeRun, { params: { runId: stray } });
    expect((await problemOf(call(bench, getRun, { params: { runId: stray } }))).code).toBe(
      "not-found",
    );
  });

  it("say a duplicate, and take the same file for the same place once", async () => {
    const series = await planTestSeries(bench);
    const first = await send(series, "76.wav", file("short-76").bytes);
    expect(await send(series, "76.wav", file("short-76").bytes)).toBe(first);
    const twin = await checked(await send(series, "room.wav", file("short-76").bytes));
    expect(twin.state).toBe("failed");
    expect(twin.report?.checks.find((check) => check.code === "duplicate")?.finding).toContain(
      "76.wav",
    );
  });

  it("come back as they were sent, whole or in part", async () => {
    const series = await planTestSeries(bench);
    const runId = await send(series, "76.wav", file("short-76").bytes);
    const options = { baseUrl: bench.product.url, token: bench.all.token };
    const whole = await requestApi(downloadRun, { params: { runId } }, options);
    expect(whole.headers.get("content-disposition")).toContain('filename="76.wav"');
    expect(Buffer.from(await whole.bytes()).equals(file("short-76").bytes)).toBe(true);
    const part = await fetch(`${bench.product.url}/api/v1/runs/${runId}/file`, {
      headers: { authorization: `Bearer ${bench.all.token}`, range: "bytes=100-199" },
    });
    expect([part.status, part.headers.get("content-range")]).toEqual([
      206,
      `bytes 100-199/${file("short-76").bytes.length}`,
    ]);
    expect(Buffer.from(await part.bytes()).equals(file("short-76").bytes.subarray(100, 200))).toBe(
      true,
    );
  });
});

describe("a plan", () => {
  it("may be changed until the first recording is in, by one person at a time", async () => {
    const series = await planTestSeries(bench);
    const params = { seriesId: series.id };
    const plan = planSchema.parse({ ...series.plan, place: { distance_m: 2 } });
    const changed = await call(bench, updatePlan, {
      params,
      body: { plan, plan_version: series.plan_version },
    });
    expect([changed.plan.place.distance_m, changed.plan_version]).toEqual([
      2,
      series.plan_version + 1,
    ]);
    const late = await problemOf(
      call(bench, updatePlan, { params, body: { plan, plan_version: series.plan_version } }),
    );
    expect([late.code, late.status]).toEqual(["conflict.changed", 409]);
    const nowhere = {
      ...plan,
      microphone: { file_name: "m.txt", digest: "a".repeat(64), kind: "response" as const },
    };
    const unknown = await problemOf(
      call(bench, updatePlan, {
        params,
        body: { plan: nowhere, plan_version: changed.plan_version },
      }),
    );
    expect(unknown.code).toBe("plan.invalid");

    await send(series, "76.wav", file("short-76").bytes);
    const locked = await problemOf(
      call(bench, updatePlan, { params, body: { plan, plan_version: changed.plan_version } }),
    );
    expect(locked.code).toBe("plan.locked");
    // Criteria are a setting of the analysis and stay open.
    const criteria = [{ thd_percent: 5 }];
    const judged = await call(bench, updateCriteria, {
      params,
      body: { criteria, plan_version: changed.plan_version },
    });
    expect(judged.plan.criteria).toEqual(criteria);
  });

  it("is fetched as WAV files that are right to the sample, and as one ZIP", async () => {
    const series = await planTestSeries(bench);
    const options = { baseUrl: bench.product.url, token: bench.all.token };
    const params = { seriesId: series.id, slot: "short-86" };
    const answer = await requestApi(getStimulus, { params }, options);
    const bytes = await answer.bytes();
    const audio = readWav(toByteSource(bytes), "stimulus");
    expect([audio.bits, audio.rateHz]).toEqual([24, 48_000]);
    const missing = await problemOf(
      requestApi(getStimulus, { params: { ...params, slot: "ambient" } }, options),
    );
    expect(missing.code).toBe("not-found");

    const zip = await requestApi(getStimulusZip, { params: { seriesId: series.id } }, options);
    const archive = Buffer.from(await zip.bytes());
    const entries = unzip(archive);
    expect([...entries.keys()]).toEqual([
      "brackenmini_check-list.txt",
      "brackenmini_76_short.wav",
      "brackenmini_86_short.wav",
      "brackenmini_76_closing.wav",
    ]);
    expect(entries.get("brackenmini_86_short.wav")?.equals(bytes)).toBe(true);
    expect(entries.get("brackenmini_check-list.txt")?.toString()).toContain("1. [ ] Calibrator");
  });
});

describe("a series", () => {
  it("is deleted while empty, archived and restored with recordings", async () => {
    const empty = await planTestSeries(bench);
    expect(await call(bench, removeSeries, { params: { seriesId: empty.id } })).toEqual({
      outcome: "deleted",
    });
    const full = await planTestSeries(bench);
    const params = { seriesId: full.id };
    const runId = await send(full, "76.wav", file("short-76").bytes);
    await checked(runId);
    expect(await call(bench, removeSeries, { params })).toEqual({ outcome: "archived" });
    expect((await problemOf(act(runId, { act: "check-again" }))).code).toBe("conflict.state");
    expect((await problemOf(call(bench, removeSeries, { params }))).code).toBe("conflict.state");
    expect((await call(bench, restoreSeries, { params })).archived_at).toBeNull();
    expect((await problemOf(call(bench, restoreSeries, { params }))).code).toBe("conflict.state");
  });

  it("says what an analysis lacks", async () => {
    const series = await planTestSeries(bench);
    const params = { seriesId: series.id };
    await checked(await send(series, "76.wav", file("short-76").bytes));
    expect((await problemOf(call(bench, startAnalysis, { params }))).code).toBe(
      "series.too-few-runs",
    );
    await checked(await send(series, "86.wav", file("short-86").bytes));
    expect((await problemOf(call(bench, startAnalysis, { params }))).code).toBe(
      "calibration.missing",
    );
  });

  it("is followed live", async () => {
    const series = await planTestSeries(bench);
    const stream = await requestApi(
      followSeries,
      { params: { seriesId: series.id } },
      { baseUrl: bench.product.url, token: bench.all.token },
    );
    expect(stream.headers.get("content-type")).toBe("text/event-stream");
    const reader = stream.body?.pipeThrough(new TextDecoderStream()).getReader();
    let text = "";
    const readUntil = async (changes: number): Promise<void> => {
      while (text.split("event: change").length - 1 < changes)
        text += (await reader?.read())?.value ?? "";
    };
    await readUntil(1);
    const heard = readUntil(3);
    await send(series, "76.wav", file("short-76").bytes);
    await heard;
    expect(text).toContain(`data: {"series_id":"${series.id}","analysis_id":null}`);
    await reader?.cancel();
  });
});
