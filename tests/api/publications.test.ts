/** Publishing by the API: what may be published, what stays as it was, what an address leads to. */
import { sql } from "kysely";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { claimAnalysis, createAnalysis } from "../../db/queries/analyses";
import { findPublication, getSnapshotText } from "../../db/queries/publications";
import { saveResult } from "../../db/queries/results";
import { compareSeries } from "../../lib/api/compare";
import {
  answerMakerComment,
  createPreview,
  draftPublication,
  listPreviews,
  listPublications,
  publish,
  revokePreview,
  withdrawPublication,
} from "../../lib/api/publications";
import { getSeries, getSeriesHistory, listSeries } from "../../lib/api/series";
import { digestText, parseSnapshotText } from "../../lib/publication/canonical";
import { makeSampleResult } from "../support/sample-result";
import { signTestSeries } from "../support/signed-series";
import { call, openApiBench, planTestSeries, problemOf, type ApiBench } from "./support";

let bench: ApiBench;
beforeAll(async () => {
  bench = await openApiBench();
});
afterAll(() => bench.stop());

const SUPPLIED = { supplied_by: "bought by the lab" };
let made = 0;

/** An analysed series; signed off unless `signed` says no. */
async function makeSeries(signed = true): Promise<{ seriesId: string; analysisId: string }> {
  const { id: seriesId } = await planTestSeries(bench);
  made += 1;
  const inputsDigest = String(made).padStart(64, "0");
  const analysisId = await inLab(bench.app, bench.all.scope, async (trx) => {
    const result = makeSampleResult();
    const id = await createAnalysis(trx, bench.labId, {
      seriesId,
      inputs: { series: {}, files: [] },
      inputsDigest,
      settings: result.settings,
      engineVersion: "1.0.0",
      requestedBy: null,
    });
    await claimAnalysis(trx, bench.labId, id, 0);
    await saveResult(trx, bench.labId, id, result, new Map());
    if (signed) {
      await signTestSeries(trx, bench.all.scope, {
        seriesId,
        analysisId: id,
        criterion: { compression_dB: 3 },
        changed: { nominal_Hz: 50, cause: "port", reason: "seen with the port blocked" },
      });
    }
    return id;
  });
  return { seriesId, analysisId };
}

const lookUp = (slug: string, revision: number | null) =>
  findPublication(bench.app, { lab: "own", slug, revision });

describe("publishing", () => {
  it("refuses what nobody signed", async () => {
    const { seriesId } = await makeSeries(false);
    const problem = await problemOf(call(bench, publish, { params: { seriesId }, body: SUPPLIED }));
    expect(problem).toMatchObject({ code: "conflict.state", status: 409 });
    expect(problem.detail).toContain("not signed off");
  });

  it("keeps the canonical bytes under their digest, and fills the last box", async () => {
    const { seriesId } = await makeSeries();
    const view = await call(bench, publish, {
      params: { seriesId },
      body: { ...SUPPLIED, slug: "kept" },
    });
    expect(view).toMatchObject({
      revision: 1,
      state: "live",
      path: "/t/own/kept/1",
      newest_path: "/t/own/kept",
    });
    const text = await inLab(bench.app, bench.all.scope, (trx) =>
      getSnapshotText(trx, bench.labId, view.id),
    );
    expect(digestText(text)).toBe(view.digest);
    const snapshot = parseSnapshotText(text);
    expect(snapshot.bands.find((band) => band.nominal_Hz === 50)).toMatchObject({
      cause: "port",
      cause_changed: true,
    });
    expect(snapshot.headline).toEqual(makeSampleResult().headline[0]);
    const series = await call(bench, getSeries, { params: { seriesId } });
    expect(series.steps.at(-1)).toMatchObject({ step: "published", done: true });
    const list = await call(bench, listSeries, { query: { page_size: 100 } });
    expect(list.series.find((row) => row.id === seriesId)?.state_detail).toBe("published");
    const history = await call(bench, getSeriesHistory, { params: { seriesId } });
    expect(history.events.map((event) => event.act)).toContain("publication.published");
  });

  it("refuses an analysis whose result is not the one that was signed", async () => {
    const { seriesId } = await makeSeries();
    await inLab(bench.app, bench.all.scope, (trx) =>
      sql`update sign_offs set result_digest = ${"0".repeat(64)}
        where series_id = ${seriesId}`.execute(trx),
    );
    const problem = await problemOf(call(bench, publish, { params: { seriesId }, body: SUPPLIED }));
    expect(problem.detail).toContain("not the one that was signed");
  });

  it("gives an address to one series only, and never moves it", async () => {
    const first = await makeSeries();
    const second = await makeSeries();
    const body = { ...SUPPLIED, slug: "taken" };
    await call(bench, publish, { params: { seriesId: first.seriesId }, body });
    expect(
      await problemOf(call(bench, publish, { params: { seriesId: second.seriesId }, body })),
    ).toMatchObject({ code: "conflict.exists" });
    const moved = { ...SUPPLIED, slug: "elsewhere", change_note: "another name" };
    expect(
      await problemOf(call(bench, publish, { params: { seriesId: first.seriesId }, body: moved })),
    ).toMatchObject({ code: "conflict.state" });
  });

  it("corrects by a new revision with a note, and the database keeps the old one as it was", async () => {
    const { seriesId } = await makeSeries();
    const params = { seriesId };
    const first = await call(bench, publish, { params, body: { ...SUPPLIED, slug: "corrected" } });
    expect(await problemOf(call(bench, publish, { params, body: SUPPLIED }))).toMatchObject({
      code: "run.reason-missing",
    });
    const second = await call(bench, publish, {
      params,
      body: { supplied_by: "lent by the maker", change_note: "the unit was lent, not bought" },
    });
    const { publications } = await call(bench, listPublications, { params });
    expect(publications.map(({ revision, state }) => [revision, state])).toEqual([
      [2, "live"],
      [1, "replaced"],
    ]);
    expect((await lookUp("corrected", null))?.publicationId).toBe(second.id);
    expect((await lookUp("corrected", 1))?.publicationId).toBe(first.id);
    await expect(
      inLab(bench.app, bench.all.scope, (trx) =>
        sql`update publications set snapshot = '{}' where id = ${first.id}`.execute(trx),
      ),
    ).rejects.toThrow("never changed");

    const read = async (path: string) => (await fetch(`${bench.product.url}${path}`)).text();
    const old = await read(first.path);
    expect(old).toContain("Revision 1 was replaced by revision 2 on");
    expect(old).toContain("What changed: the unit was lent, not bought");
    expect(old).toContain(`href="${second.newest_path}"`);
    // Its own figures and words stand as they were.
    expect(old).toContain("bought by the lab");
    const newest = await read(second.newest_path);
    expect(newest).toContain("lent by the maker");
    expect(newest).not.toContain("was replaced by");
    expect(newest).toContain(`href="${first.path}"`);
    expect(await read(`${second.newest_path}?units=ft`)).toContain("9.8\u00a0ft (3.0\u00a0m)");
  });

  it("holds a first publication back until its embargo ends, but no correction", async () => {
    const { seriesId } = await makeSeries();
    const params = { seriesId };
    const tomorrow = new Date(Date.now() + 86_400_000).toISOString();
    const body = { ...SUPPLIED, slug: "later", embargo_until: tomorrow };
    const view = await call(bench, publish, { params, body });
    expect(view.embargo_until).toBe(tomorrow);
    expect(await lookUp("later", null)).toBeNull();
    // What nobody has seen may be corrected, and waits as long.
    const again = await call(bench, publish, {
      params,
      body: { ...SUPPLIED, change_note: "a typing error" },
    });
    expect(again.embargo_until).toBe(tomorrow);
    expect(await lookUp("later", null)).toBeNull();

    const seen = await makeSeries();
    await call(bench, publish, { params: seen, body: { ...SUPPLIED, slug: "seen" } });
    const held = { ...SUPPLIED, change_note: "a note", embargo_until: tomorrow };
    expect(await problemOf(call(bench, publish, { params: seen, body: held }))).toMatchObject({
      code: "conflict.state",
    });
  });

  it("withdraws once, with the reason kept", async () => {
    const { seriesId } = await makeSeries();
    const { id } = await call(bench, publish, {
      params: { seriesId },
      body: { ...SUPPLIED, slug: "gone" },
    });
    const body = { reason: "the microphone file was the wrong one" };
    const params = { publicationId: id };
    const view = await call(bench, withdrawPublication, { params, body });
    expect(view).toMatchObject({ state: "withdrawn", withdraw_reason: body.reason });
    expect(await problemOf(call(bench, withdrawPublication, { params, body }))).toMatchObject({
      code: "conflict.state",
    });
    expect((await lookUp("gone", null))?.publicationId).toBe(id);
    const series = await call(bench, getSeries, { params: { seriesId } });
    expect(series.steps.at(-1)).toMatchObject({ step: "published", done: false });
  });

  it("drafts without keeping anything", async () => {
    const { seriesId } = await makeSeries();
    const draft = await call(bench, draftPublication, {
      params: { seriesId },
      body: { words: "A quiet room helps." },
    });
    expect(draft).toMatchObject({ revision: 1, words: "A quiet room helps." });
    const { publications } = await call(bench, listPublications, { params: { seriesId } });
    expect(publications).toEqual([]);
  });
});

describe("the maker's preview", () => {
  it("is a link shown once, takes a comment, is answered and revoked", async () => {
    const { seriesId } = await makeSeries();
    const preview = await call(bench, createPreview, {
      params: { seriesId },
      body: { ...SUPPLIED, for_whom: "Withy Lane", days: 7 },
    });
    const { link } = preview;
    expect(new URL(link).pathname).toMatch(/^\/preview\/[\w-]{43}$/);
    const list = await call(bench, listPreviews, { params: { seriesId } });
    expect(JSON.stringify(list)).not.toContain(link.slice(-43));
    expect(await leave(link, { name: "Ida", email: "ida@maker.test", words: "Try 63 Hz." })).toBe(
      303,
    );
    const [comment] = (await call(bench, listPreviews, { params: { seriesId } })).comments;
    expect(comment).toMatchObject({ name: "Ida", email: "ida@maker.test", words: "Try 63 Hz." });
    const answered = await call(bench, answerMakerComment, {
      params: { commentId: comment?.id ?? "" },
      body: { answer: "We did, twice." },
    });
    expect(answered.answer).toBe("We did, twice.");
    const page = await fetch(link);
    const html = await page.text();
    expect(page.headers.get("cache-control")).toBe("private, no-store");
    expect(page.headers.get("referrer-policy")).toBe("same-origin");
    expect(html).toContain("noindex");
    expect(html).toContain("We did, twice.");
    const params = { previewId: preview.id };
    expect((await call(bench, revokePreview, { params })).revoked_at).not.toBeNull();
    expect((await fetch(link)).status).toBe(404);
    expect(await leave(link, { name: "Ida", email: "ida@maker.test", words: "More." })).toBe(404);
  });
});

describe("comments of a maker", () => {
  it("are counted by link: the thirteenth in an hour is refused and kept in the form", async () => {
    const { seriesId } = await makeSeries();
    const make = () =>
      call(bench, createPreview, {
        params: { seriesId },
        body: { ...SUPPLIED, for_whom: "Withy Lane", days: 7 },
      });
    const { link } = await make();
    const form = { name: "Ida", email: "ida@maker.test", words: "Once more." };
    for (let nth = 0; nth < 12; nth += 1) expect(await leave(link, form)).toBe(303);
    const refused = await send(link, { ...form, words: "What <b>now</b>?" });
    expect(refused.status).toBe(422);
    const page = await refused.text();
    expect(page).toContain("Too many comments in a short time.");
    expect(page).toContain("What &lt;b&gt;now&lt;/b&gt;?");
    const { comments } = await call(bench, listPreviews, { params: { seriesId } });
    expect(comments).toHaveLength(12);
    // Another link has a count of its own.
    expect(await leave((await make()).link, form)).toBe(303);
  });
});

const send = (link: string, form: Record<string, string>): Promise<Response> =>
  fetch(link, {
    method: "POST",
    redirect: "manual",
    headers: { origin: bench.product.url },
    body: new URLSearchParams(form),
  });

const leave = async (link: string, form: Record<string, string>): Promise<number> =>
  (await send(link, form)).status;

describe("comparing", () => {
  it("puts series side by side under a criterion, the first as the reference", async () => {
    const [a, b] = [await makeSeries(false), await makeSeries(false)];
    const { id: planned } = await planTestSeries(bench);
    const gone = "00000000-0000-4000-8000-000000000000";
    const query = { series: [a.seriesId, b.seriesId, planned, gone].join(","), thd: "off" };
    const answer = await call(bench, compareSeries, { query });
    expect(answer.criterion).toEqual({ compression_dB: 3 });
    expect(answer.tests.map((test) => test.id)).toEqual([a.seriesId, b.seriesId]);
    expect(answer.left_out.map(({ id, why }) => [id, why])).toEqual([
      [planned, "It has no analysis yet."],
      [gone, "It is no longer there."],
    ]);
    expect(answer.asked.map((one) => one.id)).toEqual([a.seriesId, b.seriesId, planned]);
    expect(answer.offered.runs).toEqual(["short-term", "long-term"]);
    // The same loudspeaker twice: no difference where both were reached, nothing known elsewhere.
    const shown = answer.tests[1]?.differences.map((one) => one.shown) ?? [];
    expect(shown).toHaveLength(answer.bands_Hz.length);
    expect(new Set(shown)).toEqual(new Set(["none", "unknown"]));
    expect(shown[answer.bands_Hz.indexOf(50)]).toBe("none");
    expect(shown[answer.bands_Hz.indexOf(1000)]).toBe("unknown");
  });

  it("refuses five, and what is no id", async () => {
    const id = "00000000-0000-4000-8000-000000000000";
    for (const series of [Array.from({ length: 5 }, () => id).join(","), "osier-8a", ""]) {
      const problem = await problemOf(call(bench, compareSeries, { query: { series } }));
      expect(problem.code).toBe("request.invalid");
    }
    const problem = await problemOf(call(bench, compareSeries, { query: { series: id } }));
    expect(problem.code).toBe("not-found");
  });
});
