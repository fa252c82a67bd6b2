/** What leaves the lab as a folder: the command computes the same bytes from it. */
import { createHash } from "node:crypto";
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { getResult } from "../../lib/api/analyses";
import { requestApi } from "../../lib/api/client";
import { createSeriesFromFolder, getEvidence, getSeriesFolder } from "../../lib/api/keeping";
import { listLoudspeakers } from "../../lib/api/loudspeakers";
import { publish, withdrawPublication } from "../../lib/api/publications";
import { requestRun } from "../../lib/api/review";
import { actOnRun, listRuns, removeRun } from "../../lib/api/runs";
import { getSeries, removeSeries, type SeriesView } from "../../lib/api/series";
import { runAnalyse } from "../support/analyse-command";
import { writeSeriesFolder } from "../support/series-folder";
import { signTestSeries } from "../support/signed-series";
import { getTestSeries } from "../support/test-series";
import { uploadWhole } from "../support/tus";
import { unzip, unzipTo } from "../support/unzip";
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
let series: SeriesView;
let resultText: string;
const root = mkdtempSync(join(tmpdir(), "keeping-"));
beforeAll(async () => {
  bench = await openApiBench();
  const planned = await planTestSeries(bench);
  for (const { name, bytes } of getTestSeries().files) {
    await uploadWhole(target(bench), bytes, { seriesId: planned.id, fileName: name });
  }
  series = await seriesInState(bench, planned.id, "in review");
  const analysisId = series.latest_done_analysis?.id ?? "";
  resultText = await (await request(getResult, { params: { analysisId } })).text();
});
afterAll(async () => {
  rmSync(root, { recursive: true });
  await bench.stop();
});

const request: typeof requestApi = (operation, input) =>
  requestApi(operation, input, { baseUrl: bench.product.url, token: bench.all.token });
const toBuffer = async (response: Response): Promise<Buffer> =>
  Buffer.from(await response.arrayBuffer());
const digest = (bytes: Uint8Array): string => createHash("sha256").update(bytes).digest("hex");

describe("a series as a folder", () => {
  it("gives the command what the worker had: the same result, byte for byte", async () => {
    const response = await request(getSeriesFolder, { params: { seriesId: series.id } });
    const archive = await toBuffer(response);
    expect(response.headers.get("content-type")).toBe("application/zip");
    unzipTo(archive, root);
    const [folder = ""] = readdirSync(root);
    expect(folder).toBe(`brackenmini_${series.number}`);
    const names = readdirSync(join(root, folder));
    expect(names.toSorted()).toEqual(
      ["series.json", ...getTestSeries().files.map(({ name }) => name)].toSorted(),
    );
    for (const { name, bytes } of getTestSeries().files) {
      expect(digest(readFileSync(join(root, folder, name)))).toBe(digest(bytes));
    }
    const { code, stdout } = await runAnalyse(root, folder);
    expect(code).toBe(0);
    expect(stdout.length).toBeGreaterThan(10_000);
    expect(stdout).toBe(resultText);
  });

  it("is that of one version where one is named, and refuses what is not there", async () => {
    const params = { seriesId: series.id };
    const one = await toBuffer(await request(getSeriesFolder, { params, query: { version: 1 } }));
    expect([...unzip(one).keys()][0]).toBe(`brackenmini_${series.number}_v1/series.json`);
    expect(
      await problemOf(call(bench, getSeriesFolder, { params, query: { version: 7 } })),
    ).toMatchObject({ code: "not-found" });
    const empty = await planTestSeries(bench);
    expect(
      await problemOf(call(bench, getSeriesFolder, { params: { seriesId: empty.id } })),
    ).toMatchObject({ code: "series.too-few-runs" });
  });
});

describe("a folder as a series", () => {
  it("gives the worker what the command has: names, order and result, byte for byte", async () => {
    const folder = join(root, "foreign");
    const amplitude = (levelDb: number): number => 0.3 * 10 ** ((levelDb - 102) / 20);
    writeSeriesFolder(folder, {
      levels: [86, 76, 96],
      lengthS: 2,
      device: (levelDb) => ({
        amplitudes: (f) => [amplitude(levelDb - Math.max(0, levelDb - 90) / (1 + (f / 150) ** 4))],
      }),
    });
    const { series: started, uploads } = await call(bench, createSeriesFromFolder, {
      body: {
        series_json: readFileSync(join(folder, "series.json"), "utf8"),
        loudspeaker: { maker: "Foreign", model: "One", kind: "other" },
      },
    });
    expect(uploads.map(({ file }) => file)).toEqual([
      "calibrator.wav",
      "ambient.wav",
      "76.wav",
      "86.wav",
      "96.wav",
    ]);
    const params = { seriesId: started.id };
    for (const { file, slot, channel } of uploads) {
      await uploadWhole(target(bench), new Uint8Array(readFileSync(join(folder, file))), {
        seriesId: started.id,
        fileName: file,
        slot,
        channel: String(channel),
      });
    }
    const done = await until(
      bench,
      async () => {
        const { runs } = await call(bench, listRuns, { params });
        const failed = runs.find((run) => run.state === "failed" && run.slot !== null);
        if (failed !== undefined) {
          const body = { act: "keep", reason: "as the command takes it" } as const;
          await call(bench, actOnRun, { params: { runId: failed.id }, body });
        }
        return call(bench, getSeries, { params });
      },
      ({ state }) => state === "in review" || state === "analysis failed",
    );
    const analysisId = done.latest_done_analysis?.id ?? "";
    const text = await (await request(getResult, { params: { analysisId } })).text();
    const { stdout } = await runAnalyse(root, "foreign");
    expect(stdout.length).toBeGreaterThan(10_000);
    expect(text).toBe(stdout);
  });

  it("is refused by name where a series here cannot hold it, and leaves no loudspeaker", async () => {
    const count = async () =>
      (await call(bench, listLoudspeakers, { query: {} })).loudspeakers.length;
    const before = await count();
    const fault = await problemOf(
      call(bench, createSeriesFromFolder, {
        body: {
          series_json: JSON.stringify({
            loudspeaker: "A B",
            environment: "anechoic",
            distance_m: 1,
            stimulus: {
              file: "s.wav",
              start_Hz: 20,
              stop_Hz: 20_000,
              length_s: 2,
              rate_Hz: 48_000,
            },
            calibration: { full_scale_dB: 124 },
            runs: [
              { file: "76.wav", level_dB: 76 },
              { file: "86.wav", level_dB: 86 },
            ],
          }),
          loudspeaker: { maker: "A", model: "B", kind: "other" },
        },
      }),
    );
    expect(fault).toMatchObject({ code: "series.not-plannable", status: 422 });
    expect(fault.detail).toContain("stimulus.file");
    expect(await count()).toBe(before);
  });
});

describe("the evidence of a publication", () => {
  it("is given to readers where the lab says so, and proves the published result", async () => {
    await inLab(bench.app, bench.all.scope, (trx) =>
      signTestSeries(trx, bench.all.scope, {
        seriesId: series.id,
        analysisId: series.latest_done_analysis?.id ?? "",
        criterion: { compression_dB: 3 },
      }),
    );
    const body = { supplied_by: "bought by the lab", slug: "bracken", evidence_public: false };
    const params = { seriesId: series.id };
    const hidden = await call(bench, publish, { params, body });
    const publicPack = (path: string) => fetch(`${bench.product.url}${path}/evidence.zip`);
    expect((await publicPack(hidden.path)).status).toBe(404);
    expect(await (await fetch(`${bench.product.url}${hidden.path}`)).text()).not.toContain(
      "evidence.zip",
    );
    const own = await request(getEvidence, { params: { publicationId: hidden.id } });
    expect(unzip(await toBuffer(own)).has("bracken-1/evidence.json")).toBe(true);

    const shown = await call(bench, publish, {
      params,
      body: {
        supplied_by: "bought by the lab",
        evidence_public: true,
        change_note: "with evidence",
      },
    });
    const page = await (await fetch(`${bench.product.url}${shown.path}`)).text();
    expect(page).toContain("Check this yourself");
    expect(page).toContain(`href="${shown.path}/evidence.zip"`);
    const archive = await toBuffer(await publicPack(shown.path));
    unzipTo(archive, root);
    const folder = join(root, "bracken-2");
    const sums = readFileSync(join(folder, "SHA256SUMS"), "utf8").trimEnd().split("\n");
    expect(sums).toHaveLength(readdirSync(folder).length - 1);
    for (const line of sums) {
      expect(digest(readFileSync(join(folder, line.slice(66))))).toBe(line.slice(0, 64));
    }
    expect(digest(readFileSync(join(folder, "publication.json")))).toBe(shown.digest);
    expect(readFileSync(join(folder, "result.json"), "utf8")).toBe(resultText);
    const same = await runAnalyse(root, "bracken-2");
    expect(same.stdout).toBe(resultText);
    expect(same.stderr).not.toMatch(/differs|evidence\./);

    const path = join(folder, "evidence.json");
    const text = readFileSync(path, "utf8");
    expect(text).toMatch(/"source_commit": ("[0-9a-f]{40}|null)/);
    writeFileSync(path, text.replace(/"version": "[^"]+"/, '"version": "0.9.0"'));
    const newer = await runAnalyse(root, "bracken-2");
    expect(newer.stderr).toMatch(/^warning engine\.differs: .*engine 0\.9\.0/m);
    expect(newer.code).toBe(0);

    const reason = { reason: "the wrong microphone file" };
    await call(bench, withdrawPublication, { params: { publicationId: shown.id }, body: reason });
    expect((await publicPack(shown.path)).status).toBe(404);
  });
});

describe("a series without recordings", () => {
  it("lets an empty series go, also where a file came and was removed; what was asked for is archived", async () => {
    const empty = await planTestSeries(bench);
    const params = { seriesId: empty.id };
    const runId = await uploadWhole(
      target(bench),
      getTestSeries().files[0]?.bytes.slice() ?? new Uint8Array(),
      {
        seriesId: empty.id,
        fileName: "nothing like it.wav",
      },
    );
    await call(bench, removeRun, { params: { runId } });
    expect(await call(bench, removeSeries, { params })).toEqual({ outcome: "deleted" });
    const asked = await planTestSeries(bench);
    await call(bench, requestRun, {
      params: { seriesId: asked.id },
      body: { level_dB: 80, reason: "narrower" },
    });
    expect(await call(bench, removeSeries, { params: { seriesId: asked.id } })).toEqual({
      outcome: "archived",
    });
  });
});
