import { readdirSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { sql } from "kysely";
import { Upload } from "tus-js-client";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { inLab } from "../../db/in-lab";
import { problemSchema } from "../../lib/api/common";
import { getResult } from "../../lib/api/analyses";
import { actOnRun, excuseSlot, getRun, listRuns } from "../../lib/api/runs";
import { stagingFolder, storeFolder } from "../../lib/storage/folders";
import { makeTestLab, makeTestMember, type TestMember } from "../support/lab-bench";
import { makeMalformedFiles } from "../support/malformed-wav";
import { endLife } from "../support/processes";
import { seededRandom } from "../support/seeded-random";
import { getTestSeries, type TestFile } from "../support/test-series";
import { createTus, headTus, patchAndCut, patchTus, uploadWhole } from "../support/tus";
import {
  call,
  openApiBench,
  planTestSeries,
  seriesInState,
  target,
  until,
  type ApiBench,
} from "./support";

let bench: ApiBench;
let seriesId = "";
let colleague: TestMember;
let reader: TestMember;
let stranger: TestMember;
beforeAll(async () => {
  bench = await openApiBench({ TIDEMARK_MAX_UPLOAD_MB: "3" });
  seriesId = (await planTestSeries(bench)).id;
  colleague = await makeTestMember(bench, bench.labId, "colleague", ["tester"]);
  reader = await makeTestMember(bench, bench.labId, "reader", ["reviewer"]);
  stranger = (await makeTestLab(bench, "other")).all;
});
afterAll(() => bench.stop());

const file = (slot: string): TestFile => {
  const found = getTestSeries().files.find((one) => one.slot === slot);
  if (found === undefined) throw new Error(`no recording for ${slot}`);
  return found;
};
const problemIn = async (response: Response) => {
  expect(response.headers.get("content-type")).toBe("application/problem+json");
  return problemSchema.parse(await response.json());
};
async function begin(one: TestFile, metadata: Record<string, string> = {}): Promise<string> {
  const created = await createTus(target(bench), one.bytes.length, {
    seriesId,
    fileName: one.name,
    ...metadata,
  });
  expect(created.status).toBe(201);
  return created.headers.get("location") ?? "";
}
async function offsetOf(location: string): Promise<number> {
  const head = await headTus(target(bench), location);
  expect(head.status).toBe(200);
  return Number(head.headers.get("upload-offset"));
}
const filesIn = (folder: string): string[] =>
  readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name))
    .sort((a, b) => a.localeCompare(b));
const staged = () => filesIn(stagingFolder(bench.product.dataDir));
const stored = () => filesIn(storeFolder(bench.product.dataDir));
const countRows = (table: "uploads" | "runs" | "recordings") =>
  inLab(bench.app, bench.all.scope, async (trx) => {
    const { rows } = await sql<{ n: number }>`
      select count(*) as n from ${sql.table(table)}`.execute(trx);
    return rows[0]?.n ?? -1;
  });

describe("an upload that is cut", () => {
  it("goes on from any offset, also across a restart of the server, to the same bytes", async () => {
    const one = file("ambient");
    const random = seededRandom(20_261_201);
    const location = await begin(one);
    let cuts = 0;
    let offset = 0;
    while (offset < one.bytes.length - 1) {
      const rest = one.bytes.subarray(offset);
      const sent = Math.floor(random.uniform(1, Math.min(rest.length - 1, one.bytes.length / 4)));
      await patchAndCut(target(bench), location, offset, rest, sent);
      if (cuts === 2) await restartWeb();
      const now = await until(
        bench,
        () => offsetOf(location),
        () => true,
      );
      expect(now).toBeGreaterThanOrEqual(offset);
      expect(now).toBeLessThan(one.bytes.length);
      offset = now;
      cuts += 1;
      if (cuts > 6) break;
    }
    expect(cuts).toBeGreaterThan(3);
    const last = await patchTus(target(bench), location, offset, one.bytes.slice(offset));
    expect(last.status).toBe(204);
    const runId = last.headers.get("tidemark-run-id") ?? "";
    const run = await call(bench, getRun, { params: { runId } });
    expect([run.slot, run.bytes]).toEqual(["ambient", one.bytes.length]);
    const digest = Buffer.from(await crypto.subtle.digest("SHA-256", one.bytes)).toString("hex");
    expect(run.digest).toBe(digest);
  });

  it("tells its run again to a client that lost the last answer", async () => {
    const one = file("calibrator-before");
    const location = await begin(one);
    const sent = await patchTus(target(bench), location, 0, one.bytes);
    const runId = sent.headers.get("tidemark-run-id");
    expect(runId).toMatch(/^[0-9a-f-]{36}$/);
    const head = await headTus(target(bench), location);
    expect(head.headers.get("upload-offset")).toBe(String(one.bytes.length));
    expect(head.headers.get("tidemark-run-id")).toBe(runId);
    const again = await patchTus(target(bench), location, one.bytes.length, new Uint8Array());
    expect([again.status, again.headers.get("tidemark-run-id")]).toEqual([204, runId]);
  });

  it("becomes a run although the server died when the last byte was in", async () => {
    const one = file("short-76");
    const location = await begin(one, { slot: "short-76" });
    // All bytes go out, and the server is killed before or while it makes a run of them.
    await patchAndCut(target(bench), location, 0, one.bytes, one.bytes.length);
    await restartWeb();
    const finished = await until(
      bench,
      async () => {
        const head = await headTus(target(bench), location);
        const offset = Number(head.headers.get("upload-offset"));
        if (offset < one.bytes.length) {
          await patchTus(target(bench), location, offset, one.bytes.slice(offset));
        }
        return head.headers.get("tidemark-run-id");
      },
      (runId) => runId !== null,
    );
    const { runs } = await call(bench, listRuns, { params: { seriesId } });
    expect(runs.filter((run) => run.file_name === one.name).map((run) => run.id)).toEqual([
      finished,
    ]);
    expect(staged()).toEqual([]);
  });

  it("makes one run of the last byte that comes twice at once", async () => {
    const one = file("closing-76");
    const location = await begin(one);
    await patchTus(target(bench), location, 0, one.bytes.slice(0, -1));
    const last = () => patchTus(target(bench), location, one.bytes.length - 1, one.bytes.slice(-1));
    const answers = await Promise.all([last(), last(), headTus(target(bench), location)]);
    expect(answers.filter((answer) => answer.status >= 500)).toEqual([]);
    const { runs } = await call(bench, listRuns, { params: { seriesId } });
    expect(runs.filter((run) => run.file_name === one.name)).toHaveLength(1);
  });

  it("serves a well-kept client over a cut and its own resume", async () => {
    const one = file("short-86");
    const runId = await new Promise<string | undefined>((resolve, reject) => {
      let cut = false;
      const upload = new Upload(Buffer.from(one.bytes), {
        endpoint: `${bench.product.url}/api/v1/uploads`,
        headers: { authorization: `Bearer ${bench.all.token}` },
        metadata: { seriesId, fileName: one.name },
        chunkSize: 100_000,
        retryDelays: [50, 100],
        onError: reject,
        onChunkComplete: (_size, accepted) => {
          if (cut || accepted < 200_000) return;
          cut = true;
          void upload.abort().then(() => upload.start());
        },
        onSuccess: ({ lastResponse }) => resolve(lastResponse.getHeader("tidemark-run-id")),
      });
      upload.start();
    });
    const run = await call(bench, getRun, { params: { runId: runId ?? "" } });
    expect(run.bytes).toBe(one.bytes.length);
  });
});

describe("a file that is no recording", () => {
  it.each(makeMalformedFiles().map((bad) => [bad.name, bad.code, bad] as const))(
    "%s is refused as %s, and nothing of it stays",
    async (name, code, { bytes }) => {
      const before = {
        stored: stored(),
        runs: await countRows("runs"),
        recordings: await countRows("recordings"),
      };
      const created = await createTus(target(bench), bytes.length, { seriesId, fileName: name });
      const response =
        created.status === 201
          ? await patchTus(target(bench), created.headers.get("location") ?? "", 0, bytes)
          : created;
      const problem = await problemIn(response);
      expect(problem.code).toBe(code);
      expect(problem.detail).toContain(name);
      expect(staged()).toEqual([]);
      expect({
        stored: stored(),
        runs: await countRows("runs"),
        recordings: await countRows("recordings"),
      }).toEqual(before);
      const open = await call(bench, listRuns, { params: { seriesId } });
      expect(open.uploads).toEqual([]);
    },
  );

  it("is refused by its first bytes, long before the last", async () => {
    const created = await createTus(target(bench), 2_900_000, { seriesId, fileName: "film.wav" });
    const location = created.headers.get("location") ?? "";
    const head = new TextEncoder().encode("\0\0\0\x18ftypmp42 and so on");
    const problem = await problemIn(await patchTus(target(bench), location, 0, head));
    expect(problem.code).toBe("audio.format-unsupported");
    expect((await headTus(target(bench), location)).status).toBe(404);
    expect(staged()).toEqual([]);
  });

  it.each([
    ["too large", 3_000_001, {}, 413, "upload.too-large", /3\.0 MB are taken/],
    ["empty", 0, {}, 422, "audio.empty", /holds no bytes/],
    [
      "a table of 17 MB",
      17_000_000,
      { fileName: "run.csv" },
      413,
      "table.too-large",
      /tables up to 16777216/,
    ],
    ["without a series", 10, { seriesId: "" }, 400, "request.invalid", /seriesId/],
    [
      "of no series of ours",
      10,
      { seriesId: "00000000-0000-4000-8000-000000000000" },
      404,
      "not-found",
      /no such series/,
    ],
    ["with metadata nobody knows", 10, { colour: "red" }, 400, "request.invalid", /colour/],
    ["for no channel", 10, { channel: "0" }, 400, "request.invalid", /channel/],
  ])("%s is refused at its creation", async (_name, bytes, metadata, status, code, words) => {
    const response = await createTus(target(bench), bytes, {
      seriesId,
      fileName: "take.wav",
      ...metadata,
    });
    expect(response.status).toBe(status);
    const problem = await problemIn(response);
    expect(problem.code).toBe(code);
    expect(JSON.stringify(problem)).toMatch(words);
    expect(staged()).toEqual([]);
  });

  it("has no such channel", async () => {
    const one = file("closing-76");
    const created = await createTus(target(bench), one.bytes.length, {
      seriesId,
      fileName: "mono.wav",
      channel: "2",
    });
    const location = created.headers.get("location") ?? "";
    const problem = await problemIn(await patchTus(target(bench), location, 0, one.bytes));
    expect(problem.code).toBe("audio.channel-missing");
  });
});

describe("a table in place of a recording", () => {
  const send = async (name: string, text: string, columns?: unknown) => {
    const bytes = new TextEncoder().encode(text);
    const created = await createTus(target(bench), bytes.length, {
      seriesId: tables,
      fileName: name,
      ...(columns === undefined ? {} : { columns: JSON.stringify(columns) }),
    });
    if (created.status !== 201) return problemIn(created);
    const location = created.headers.get("location") ?? "";
    const sent = await patchTus(target(bench), location, 0, bytes);
    return sent.ok ? sent.headers.get("tidemark-run-id") : problemIn(sent);
  };
  const frequencies = Array.from({ length: 241 }, (_, i) => 20 * 10 ** (i / 80));
  let tables = "";

  it("is refused while nobody can tell its columns, and taken with them", async () => {
    tables = (await planTestSeries(bench)).id;
    const mute = ["a;b;c", ...frequencies.map((hz) => `0,5;76,0;${hz.toFixed(3)}`)].join("\n");
    expect(await send("76.csv", mute)).toMatchObject({ code: "table.column-missing" });
    expect(
      await send("76.csv", mute, { frequency: 4, level: 2 }),
      "a column that is not there",
    ).toMatchObject({ code: "table.column-missing" });
    expect(await send("76.csv", mute, { frequency: 3, level: 3 })).toMatchObject({
      code: "request.invalid",
    });
    expect(await send("notes.txt", "Hello, this is prose.")).toMatchObject({
      code: "table.not-readable",
    });
    const runId = await send("76_short.csv", mute, { frequency: 3, level: 2, thd: 1 });
    if (typeof runId !== "string") throw new Error(JSON.stringify(runId));
    const run = await until(
      bench,
      () => call(bench, getRun, { params: { runId } }),
      ({ state }) => state !== "checking",
    );
    expect(run).toMatchObject({ state: "passed", slot: "short-76" });
    expect(run.report?.measured_level_dB).toBeCloseTo(76, 2);
    expect(run.report?.checks[0]?.finding).toContain(
      "frequency in column 3, level in column 2, THD in column 1",
    );
  });

  it("is no calibrator; a series of tables alone is analysed as far as tables go", async () => {
    const head = "Freq (Hz)\tSPL (dB)\tTHD (%)";
    const rows = frequencies.map((hz) => `${hz.toFixed(3)}\t85.0\t2.0`);
    const text = [head, ...rows].join("\n");
    const calibrator = await send("calibrator.tsv", text);
    if (typeof calibrator !== "string") throw new Error(JSON.stringify(calibrator));
    const refused = await until(
      bench,
      () => call(bench, getRun, { params: { runId: calibrator } }),
      ({ state }) => state !== "checking",
    );
    expect(refused.report?.checks.find((c) => c.verdict === "fail")?.title).toBe(
      "a table is no recording",
    );
    await call(bench, actOnRun, {
      params: { runId: calibrator },
      body: { act: "exclude", reason: "tables state their levels" },
    });
    expect(typeof (await send("86_short.tsv", text))).toBe("string");
    const { slots } = await call(bench, listRuns, { params: { seriesId: tables } });
    for (const { slot } of slots.filter((s) => !s.slot.startsWith("short-"))) {
      await call(bench, excuseSlot, {
        params: { seriesId: tables, slot },
        body: { reason: "tables state their levels" },
      });
    }
    const series = await seriesInState(bench, tables, "in review", "analysis failed");
    const analysisId = series.latest_done_analysis?.id ?? "";
    const result = await call(bench, getResult, { params: { analysisId } });
    const band = result.bands.find((b) => b.nominal_Hz === 1000);
    expect(band?.levels.map((l) => [l.spl_dB, l.compression_dB, l.thd_percent])).toEqual([
      [76, 0, 0.5],
      [85, 1, 2],
    ]);
    expect(result.warnings.filter((w) => w.code === "run.table")).toHaveLength(2);
  });
});

describe("the tus protocol's own refusals", () => {
  it.each([
    [
      "at another offset",
      409,
      "upload.offset",
      (location: string) => patchTus(target(bench), location, 5, new Uint8Array(5)),
    ],
    [
      "with more than announced",
      413,
      "upload.too-large",
      (location: string, one: TestFile) =>
        patchTus(target(bench), location, 0, Uint8Array.from([...one.bytes, 0])),
    ],
    [
      "without its version",
      400,
      "request.invalid",
      (location: string) =>
        fetch(`${bench.product.url}${location}`, {
          method: "PATCH",
          headers: { authorization: `Bearer ${bench.all.token}` },
        }),
    ],
  ])("%s is a problem document, and the upload goes on", async (_name, status, code, act) => {
    const one = file("calibrator-before");
    const location = await begin(one);
    const response = await act(location, one);
    expect(response.status).toBe(status);
    expect((await problemIn(response)).code).toBe(code);
    expect(await offsetOf(location)).toBe(0);
    const stop = await fetch(`${bench.product.url}${location}`, {
      method: "DELETE",
      headers: { "tus-resumable": "1.0.0", authorization: `Bearer ${bench.all.token}` },
    });
    expect(stop.status).toBe(204);
    expect((await headTus(target(bench), location)).status).toBe(404);
    expect(staged()).toEqual([]);
  });
});

describe("whose upload it is", () => {
  it("is asked at every request: another lab, a colleague, nobody", async () => {
    const one = file("calibrator-before");
    const location = await begin(one);
    for (const token of [stranger.token, colleague.token]) {
      const other = { url: bench.product.url, token };
      expect((await headTus(other, location)).status).toBe(404);
      expect((await patchTus(other, location, 0, one.bytes)).status).toBe(404);
    }
    const nobody = { url: bench.product.url, token: "tdm_nobody" };
    expect((await patchTus(nobody, location, 0, one.bytes)).status).toBe(401);
    expect(
      (
        await createTus({ url: bench.product.url, token: stranger.token }, 10, {
          seriesId,
          fileName: "x.wav",
        })
      ).status,
    ).toBe(404);
    expect(await offsetOf(location)).toBe(0);
  });

  it("may be taken away by a colleague who captures, and by no other lab", async () => {
    const location = await begin(file("calibrator-before"));
    const id = location.split("/").at(-1);
    const remove = async (token: string) => {
      const headers = { "tus-resumable": "1.0.0", authorization: `Bearer ${token}` };
      return (await fetch(`${bench.product.url}${location}`, { method: "DELETE", headers })).status;
    };
    expect(await remove(stranger.token)).toBe(404);
    expect(await remove(reader.token)).toBe(403);
    expect(await offsetOf(location)).toBe(0);
    expect(await remove(colleague.token)).toBe(204);
    const { uploads } = await call(bench, listRuns, { params: { seriesId } });
    expect(uploads.map((upload) => upload.id)).not.toContain(id);
    expect(staged().filter((path) => path.includes(id ?? ""))).toEqual([]);
  });

  it("may be a colleague's own", async () => {
    const own = { url: bench.product.url, token: colleague.token };
    const bytes = file("closing-76").bytes.slice();
    // Another take: one bit differs, in the last sample.
    bytes[bytes.length - 3] = (bytes.at(-3) ?? 0) ^ 1;
    const runId = await uploadWhole(own, bytes, { seriesId, fileName: "second closing.wav" });
    const run = await call(bench, getRun, { params: { runId } });
    expect(run.uploaded_by?.name).toBe("colleague");
  });
});

describe("an upload whose day is over", () => {
  it("is said to be expired, and its row and bytes go", async () => {
    const one = file("short-86");
    const location = await begin(one);
    await patchTus(target(bench), location, 0, one.bytes.slice(0, 1000));
    const id = z.string().parse(location.split("/").at(-1));
    await inLab(bench.app, bench.all.scope, (trx) =>
      trx
        .updateTable("uploads")
        .set({ expires_at: new Date(0) })
        .where("id", "=", id)
        .execute(),
    );
    const problem = await problemIn(
      await patchTus(target(bench), location, 1000, one.bytes.slice(1000)),
    );
    expect(problem.code).toBe("upload.expired");
    // The sweep runs at the start of a worker and every minute.
    await endLife(bench.product.worker, "SIGTERM");
    await until(
      bench,
      () => Promise.resolve(staged().filter((path) => path.includes(id))),
      (left) => left.length === 0,
    );
    const left = await inLab(bench.app, bench.all.scope, (trx) =>
      trx.selectFrom("uploads").select("id").where("id", "=", id).execute(),
    );
    expect(left).toEqual([]);
  });
});

/** Killed without warning; the supervisor starts another. */
async function restartWeb(): Promise<void> {
  await endLife(bench.product.web, "SIGKILL");
  await until(
    bench,
    async () => {
      await sleep(20);
      return fetch(`${bench.product.url}/api/openapi.json`).then(
        (answer) => answer.status,
        () => 0,
      );
    },
    (status) => status === 200,
  );
}
