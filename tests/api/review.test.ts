import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { ApiProblem } from "../../lib/api/client";
import { updateLab } from "../../lib/api/labs";
import {
  compareAnalyses,
  decideBands,
  getReview,
  keepDecisions,
  listEngineChanges,
  reopenSeries,
  requestRun,
  signOff,
  withdrawRunRequest,
  writeComment,
  type Review,
} from "../../lib/api/review";
import { actOnRun, excuseSlot, listRuns } from "../../lib/api/runs";
import { getSeries, getSeriesHistory, listSeries } from "../../lib/api/series";
import { decisionSchema } from "../../lib/review/review-schema";
import { makeTestMember, type TestMember } from "../support/lab-bench";
import { addVersion, makeReviewableSeries, type ReviewableSeries } from "../support/reviewable";
import { makeSampleResult } from "../support/sample-result";
import { call, openApiBench, type ApiBench } from "./support";

let bench: ApiBench;
let tester: TestMember;
let analyst: TestMember;
let second: TestMember;
beforeAll(async () => {
  bench = await openApiBench();
  tester = await makeTestMember(bench, bench.labId, "tester", ["tester", "analyst"]);
  analyst = await makeTestMember(bench, bench.labId, "T. Reith", ["analyst"]);
  second = await makeTestMember(bench, bench.labId, "M. Oduya", ["analyst"]);
});
afterAll(() => bench.stop());

const CRITERION = { thd_percent: 10, compression_dB: 3 };

type Wanted = NonNullable<z.input<NonNullable<typeof decideBands.body>>>["decisions"];
const decide = (analysisId: string, decisions: Wanted, by = analyst) =>
  call(bench, decideBands, { params: { analysisId }, body: { decisions } }, by.token);
const review = (analysisId: string, by = analyst): Promise<Review> =>
  call(bench, getReview, { params: { analysisId } }, by.token);
const make = (): Promise<ReviewableSeries> => makeReviewableSeries(bench, tester.scope);

async function problemOf(act: Promise<unknown>): Promise<ApiProblem> {
  try {
    await act;
  } catch (error) {
    if (error instanceof ApiProblem) return error;
    throw error;
  }
  throw new Error("it was not refused");
}

const confirmAll = ({ analysisId, result }: ReviewableSeries, by = analyst) =>
  decide(
    analysisId,
    result.bands.map((band) => ({
      nominal_Hz: band.nominal_Hz,
      cause: band.cause,
      seen_version: 0,
    })),
    by,
  );

const sign = (analysisId: string, digest: string | null, by = analyst) =>
  call(
    bench,
    signOff,
    { params: { analysisId }, body: { criterion: CRITERION, decisions_digest: digest ?? "" } },
    by.token,
  );

describe("deciding", () => {
  it("confirms, changes with a reason, opens again, and counts", async () => {
    const { analysisId, seriesId } = await make();
    const empty = await review(analysisId);
    expect(empty).toMatchObject({ bands_total: 27, bands_decided: 0, decisions_digest: null });
    expect(empty.sign_off_refusal).toBe("27 of 27 bands have no decision yet.");

    const refused = await problemOf(
      decide(analysisId, [
        { nominal_Hz: 125, cause: "none", seen_version: 0 },
        { nominal_Hz: 63, cause: "port", seen_version: 0 },
      ]),
    );
    expect([refused.status, refused.code]).toEqual([422, "run.reason-missing"]);
    expect(refused.fieldMessage("decisions.1.reason")).toBe("Give a reason.");
    expect((await review(analysisId)).bands_decided).toBe(0);

    const decided = await decide(analysisId, [
      { nominal_Hz: 63, cause: "port", reason: "the port chuffs", seen_version: 0 },
      { nominal_Hz: 125, cause: "none", seen_version: 0 },
    ]);
    expect(decided.bands_decided).toBe(2);
    expect(decided.decisions[0]).toMatchObject({
      nominal_Hz: 63,
      version: 1,
      cause: "port",
      computed_cause: "limiter",
      changed: true,
      reason: "the port chuffs",
      by: { name: "T. Reith" },
    });
    const opened = await decide(analysisId, [{ nominal_Hz: 63, cause: null, seen_version: 1 }]);
    expect(opened.decisions[0]).toMatchObject({ version: 2, cause: null, changed: false });
    expect(opened.bands_decided).toBe(1);

    const series = await call(bench, getSeries, { params: { seriesId } });
    expect(series.steps[2]).toMatchObject({ share: 1 / 27, detail: "1 of 27 bands" });
    const list = await call(bench, listSeries, { query: {} });
    expect(list.series.find((row) => row.id === seriesId)?.state_detail).toBe("1 of 27 bands");
  });

  it("loses nobody's decision where two decide the same band", async () => {
    const { analysisId, seriesId } = await make();
    await decide(
      analysisId,
      [{ nominal_Hz: 63, cause: "compressor", reason: "slope 0.4 in the repeat", seen_version: 0 }],
      second,
    );
    const late = await problemOf(
      decide(analysisId, [
        { nominal_Hz: 80, cause: "compressor", seen_version: 0 },
        { nominal_Hz: 63, cause: "limiter", seen_version: 0 },
      ]),
    );
    expect([late.status, late.code]).toEqual([409, "conflict.changed"]);
    const conflicts = z.array(decisionSchema).parse(late.problem.details?.["conflicts"]);
    expect(conflicts).toHaveLength(1);
    expect(conflicts[0]).toMatchObject({
      nominal_Hz: 63,
      cause: "compressor",
      version: 1,
      by: { name: "M. Oduya" },
    });
    // All or nothing: 80 Hz was not taken either.
    expect((await review(analysisId)).decisions.map((one) => one.nominal_Hz)).toEqual([63]);
    // Both stand in the history, though one was not taken.
    const { events } = await call(bench, getSeriesHistory, { params: { seriesId } });
    expect(events.slice(0, 2).map((event) => [event.act, event.who?.name])).toEqual([
      ["decision.overtaken", "T. Reith"],
      ["decision.taken", "M. Oduya"],
    ]);
    const again = await decide(analysisId, [{ nominal_Hz: 63, cause: "limiter", seen_version: 1 }]);
    expect(again.decisions[0]).toMatchObject({ version: 2, cause: "limiter" });
  });

  it("lets exactly one of many win who decide at the same moment", async () => {
    const { analysisId } = await make();
    const all = await Promise.allSettled(
      Array.from({ length: 6 }, (_, at) =>
        decide(
          analysisId,
          [{ nominal_Hz: 63, cause: "limiter", seen_version: 0 }],
          at % 2 === 0 ? analyst : second,
        ),
      ),
    );
    expect(all.filter((one) => one.status === "fulfilled")).toHaveLength(1);
    expect((await review(analysisId)).decisions).toHaveLength(1);
  });

  it("refuses a band that is not there and a version that cannot have been seen", async () => {
    const { analysisId } = await make();
    const wrong = [
      { nominal_Hz: 64, cause: "none" as const, seen_version: 0 },
      { nominal_Hz: 63, cause: "limiter" as const, seen_version: 3 },
    ];
    for (const one of wrong) {
      const problem = await problemOf(decide(analysisId, [one]));
      expect([one.nominal_Hz, problem.code]).toEqual([one.nominal_Hz, "request.invalid"]);
    }
  });

  it("keeps comments in order", async () => {
    const { analysisId } = await make();
    const write = (nominal_Hz: number | null, words: string) =>
      call(
        bench,
        writeComment,
        { params: { analysisId }, body: { nominal_Hz, words } },
        analyst.token,
      );
    await write(63, "THD stays under 2 % while output stops rising");
    await write(null, "a careful series");
    const { comments } = await review(analysisId);
    expect(comments.map((one) => [one.nominal_Hz, one.by.name])).toEqual([
      [63, "T. Reith"],
      [null, "T. Reith"],
    ]);
    expect((await problemOf(write(64, "no such band"))).code).toBe("request.invalid");
  });
});

describe("signing off", () => {
  it("binds version, criterion and decisions, and is taken back with a reason", async () => {
    const made = await make();
    const { analysisId, seriesId, runIds } = made;
    const decided = await confirmAll(made);
    expect(decided.decisions_digest).toMatch(/^[0-9a-f]{64}$/);
    expect(decided.sign_off_refusal).toBeNull();

    const stale = await problemOf(sign(analysisId, "0".repeat(64)));
    expect(stale.code).toBe("conflict.changed");
    const signed = await sign(analysisId, decided.decisions_digest);
    expect(signed).toMatchObject({
      analysis_version: 1,
      criterion: CRITERION,
      decisions_digest: decided.decisions_digest,
      one_person: false,
      by: { name: "T. Reith" },
      reopened: null,
    });
    const series = await call(bench, getSeries, { params: { seriesId } });
    expect(series.state).toBe("signed off");
    expect(series.steps.map((step) => step.done)).toEqual([true, true, true, true, false]);
    expect(series.steps[3]?.detail).toContain("T. Reith");

    // Nothing of it moves while it stands.
    const acts = [
      () => decide(analysisId, [{ nominal_Hz: 63, cause: null, seen_version: 1 }]),
      () => sign(analysisId, decided.decisions_digest, second),
      () =>
        call(bench, actOnRun, {
          params: { runId: runIds[2] ?? "" },
          body: { act: "exclude", reason: "a reason" },
        }),
      () =>
        call(bench, requestRun, {
          params: { seriesId },
          body: { level_dB: 91, reason: "narrower" },
        }),
    ];
    for (const act of acts) expect((await problemOf(act())).code).toBe("conflict.state");

    const reopened = await call(
      bench,
      reopenSeries,
      { params: { seriesId }, body: { reason: "a run was clipped" } },
      second.token,
    );
    expect(reopened.state).toBe("in review");
    const after = await review(analysisId);
    expect(after.sign_off).toBeNull();
    expect(after.past_sign_offs[0]?.reopened).toMatchObject({
      reason: "a run was clipped",
      by: { name: "M. Oduya" },
    });
    expect(after.bands_decided).toBe(27);
    const { events } = await call(bench, getSeriesHistory, { params: { seriesId } });
    expect(events[0]).toMatchObject({ act: "series.reopened", reason: "a run was clipped" });
    expect(events[1]?.words).toContain("signed off version 1 for THD 10");
    const nothing = call(bench, reopenSeries, { params: { seriesId }, body: { reason: "again" } });
    expect((await problemOf(nothing)).code).toBe("conflict.state");
  });

  it("is refused to who uploaded a run of this version, and says who may", async () => {
    const made = await make();
    const decided = await confirmAll(made, tester);
    const own = await review(made.analysisId, tester);
    expect(own.sign_off_refusal).toContain("two-person rule");
    expect(own.others_who_may.map((person) => person.name).toSorted()).toEqual([
      "M. Oduya",
      "T. Reith",
      "all",
    ]);
    const refused = await problemOf(sign(made.analysisId, decided.decisions_digest, tester));
    expect([refused.status, refused.code]).toEqual([403, "auth.forbidden"]);

    await call(bench, updateLab, { body: { settings: { two_person_rule: false } } });
    const signed = await sign(made.analysisId, decided.decisions_digest, tester);
    await call(bench, updateLab, { body: { settings: { two_person_rule: true } } });
    expect(signed.one_person).toBe(true);
  });

  it("refuses a criterion that the analysis did not judge by, and open bands", async () => {
    const made = await make();
    const open = await problemOf(sign(made.analysisId, "0".repeat(64)));
    expect(open.code).toBe("conflict.state");
    const decided = await confirmAll(made);
    const other = call(
      bench,
      signOff,
      {
        params: { analysisId: made.analysisId },
        body: {
          criterion: { compression_dB: 2.5 },
          decisions_digest: decided.decisions_digest ?? "",
        },
      },
      analyst.token,
    );
    expect((await problemOf(other)).code).toBe("request.invalid");
  });
});

describe("a newer analysis", () => {
  it("inherits no sign-off, shows what changed, and keeps what still fits when asked", async () => {
    const made = await make();
    const decided = await confirmAll(made);
    await sign(made.analysisId, decided.decisions_digest);
    const newer = makeSampleResult();
    const at63 = newer.bands.find((band) => band.nominal_Hz === 63);
    if (at63 === undefined) throw new Error("the sample has no 63 Hz band");
    at63.cause = "overload";
    newer.engine.version = "9.0.0";
    const newId = await addVersion(bench, tester.scope, made, newer);

    const seen = await review(newId);
    expect(seen).toMatchObject({ bands_decided: 0, sign_off: { analysis_version: 1 } });
    const { bands } = await call(bench, compareAnalyses, {
      params: { analysisId: newId },
      query: { against: made.analysisId },
    });
    expect(bands.filter((band) => band.changed).map((band) => band.nominal_Hz)).toEqual([63]);
    expect(bands.filter((band) => !band.keeps_decision).map((band) => band.nominal_Hz)).toEqual([
      63,
    ]);

    const keep = () =>
      call(
        bench,
        keepDecisions,
        { params: { analysisId: newId }, body: { from: made.analysisId } },
        second.token,
      );
    expect((await problemOf(keep())).code).toBe("conflict.state");
    await call(bench, reopenSeries, {
      params: { seriesId: made.seriesId },
      body: { reason: "a newer engine" },
    });
    const kept = await keep();
    expect(kept).toMatchObject({ bands_decided: 26, decisions_digest: null });
    expect(new Set(kept.decisions.map((one) => one.by.name))).toEqual(new Set(["M. Oduya"]));
    const older = decide(made.analysisId, [{ nominal_Hz: 63, cause: null, seen_version: 1 }]);
    expect((await problemOf(older)).code).toBe("conflict.state");
    expect(await call(bench, listEngineChanges)).toMatchObject({ series: [] });
  });
});

describe("asking for a run", () => {
  it("opens a place in the tester's plan, which can be excused or withdrawn", async () => {
    const { seriesId } = await make();
    const ask = (level_dB: number) =>
      call(
        bench,
        requestRun,
        { params: { seriesId }, body: { level_dB, reason: "narrows the onset at 63 Hz" } },
        analyst.token,
      );
    const request = await ask(91.5);
    expect(request).toMatchObject({ slot: "short-91.5", fulfilled: false, withdrawn_at: null });
    expect((await problemOf(ask(91.5))).code).toBe("conflict.exists");
    expect((await problemOf(ask(120))).code).toBe("request.invalid");

    const series = await call(bench, getSeries, { params: { seriesId } }, tester.token);
    expect(series.planned_runs.find((run) => run.slot === "short-91.5")).toMatchObject({
      label: "91.5 dB short-term",
      asked: { by: "T. Reith", reason: "narrows the onset at 63 Hz" },
    });
    const runs = await call(bench, listRuns, { params: { seriesId } }, tester.token);
    expect(runs.planned - runs.captured).toBe(1);
    expect(runs.slots.find((slot) => slot.slot === "short-91.5")?.open).toBe(true);

    await call(
      bench,
      excuseSlot,
      { params: { seriesId, slot: "short-91.5" }, body: { reason: "sent back to the maker" } },
      tester.token,
    );
    const withdraw = () =>
      call(bench, withdrawRunRequest, { params: { requestId: request.id } }, analyst.token);
    expect((await withdraw()).withdrawn_at).not.toBeNull();
    expect((await problemOf(withdraw())).code).toBe("conflict.state");
    const after = await call(bench, listRuns, { params: { seriesId } });
    expect(after.planned).toBe(after.captured);
    // Asked for again, it is open: the excuse went with the request.
    await ask(91.5);
    const again = await call(bench, listRuns, { params: { seriesId } });
    expect(again.planned - again.captured).toBe(1);
  });
});
