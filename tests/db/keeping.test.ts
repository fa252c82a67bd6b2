/** What a lab keeps, removes and takes along, on the rows themselves. */
import { createHash } from "node:crypto";
import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { makeZip } from "client-zip";
import { sql } from "kysely";
import { pino } from "pino";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { exportLab } from "../../app/_server/lab-export";
import { acceptRun } from "../../db/acts/accept-run";
import { loadCapture } from "../../db/acts/capture";
import { removeSeries, restoreSeries } from "../../db/acts/archive-series";
import { publishSeries } from "../../db/acts/publish";
import { removeRecordings } from "../../db/acts/remove-recordings";
import { toAnalysisInputs } from "../../db/acts/request-analysis";
import { loadSeriesFolder } from "../../db/acts/series-folder";
import { startFromFolder } from "../../db/acts/start-from-folder";
import type { Trx } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { listSeriesEvents } from "../../db/queries/audit";
import { EXPORTED_TABLES, LEFT_OUT_TABLES } from "../../db/queries/lab-export";
import { listArchivedSeries } from "../../db/queries/retention";
import { keepRecording } from "../../db/queries/recordings";
import { createRun, listRuns, updateRun } from "../../db/queries/runs";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { toResultText } from "../../lib/result/result-text";
import { createFolderSource, readSeriesText } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import { createFileStore } from "../../lib/storage/file-store";
import { sweepFiles, sweepRetention } from "../../workers/sweep";
import { createTestDatabase, type TestDatabase } from "../support/database";
import { makeTestLab, openLabBench, type LabBench, type TestMember } from "../support/lab-bench";
import { makeReviewableSeries } from "../support/reviewable";
import { writeSeriesFolder } from "../support/series-folder";
import { signTestSeries } from "../support/signed-series";
import { unzip } from "../support/unzip";

let database: TestDatabase;
let bench: LabBench;
let labId: string;
let all: TestMember;
const root = mkdtempSync(join(tmpdir(), "keeping-"));
const store = createFileStore(join(root, "recordings"));
beforeAll(async () => {
  mkdirSync(join(root, "staging"));
  database = await createTestDatabase();
  bench = openLabBench(database);
});
afterAll(async () => {
  rmSync(root, { recursive: true });
  await bench.close();
  await database.drop();
});
let labs = 0;
beforeEach(async () => {
  labs += 1;
  ({ labId, all } = await makeTestLab(bench, `own-${labs}`));
});

const act = <T>(run: (trx: Trx) => Promise<T>): Promise<T> => inLab(bench.app, all.scope, run);
const digest = (bytes: Uint8Array | string): string =>
  createHash("sha256").update(bytes).digest("hex");
const tools = () => ({
  db: bench.app,
  log: pino({ level: "silent" }),
  store,
  stagingFolder: join(root, "staging"),
});

async function put(bytes: Uint8Array): Promise<string> {
  const path = join(root, "staging", "one");
  writeFileSync(path, bytes);
  await store.put(path, digest(bytes));
  rmSync(path);
  return digest(bytes);
}

/** In the archive for so many days. */
async function archive(seriesId: string, days: number): Promise<void> {
  expect(await act((trx) => removeSeries(trx, all.scope, seriesId))).toBe("archived");
  await act((trx) =>
    sql`update series set archived_at = now() - make_interval(days => ${days})
      where id = ${seriesId}`.execute(trx),
  );
}

const setRetention = (days: number) =>
  act((trx) =>
    sql`update labs set settings = jsonb_set(settings, '{retention_days}', ${String(days)}::jsonb)
      where id = ${labId}`.execute(trx),
  );

describe("retention", () => {
  it("removes by the setting what nothing cites, tells the trail, and frees the bytes", async () => {
    const [cited, old, young] = [
      await makeReviewableSeries(bench, all.scope),
      await makeReviewableSeries(bench, all.scope),
      await makeReviewableSeries(bench, all.scope),
    ];
    const bytes = Buffer.from(`of lab ${labId}`);
    const stored = await put(bytes);
    await act(async (trx) => {
      await keepRecording(trx, labId, { digest: stored, bytes: bytes.length, media: "audio/wav" });
      await createRun(trx, labId, {
        seriesId: old.seriesId,
        slot: null,
        role: null,
        levelDb: null,
        variant: null,
        fileName: "unlike anything.wav",
        digest: stored,
        channel: 1,
        uploadedBy: all.scope.accountId,
        uploadedByToken: null,
      });
      const runs = (await listRuns(trx, labId, cited.seriesId)).slice(0, 3);
      const files = runs.map((run) => ({
        file: run.file_name,
        digest: run.digest,
        run_id: run.id,
      }));
      await trx
        .updateTable("analyses")
        .set({ inputs: JSON.stringify({ series: {}, files }) })
        .where("id", "=", cited.analysisId)
        .execute();
      await signTestSeries(trx, all.scope, { ...cited, criterion: { compression_dB: 3 } });
      await publishSeries(trx, all.scope, cited.seriesId, {
        words: {
          words: "",
          supplied_by: "bought by the lab",
          maker_statement: null,
          answer_to_maker: null,
          evidence_public: true,
        },
        slug: null,
        embargoUntil: null,
        changeNote: null,
      });
    });
    await archive(cited.seriesId, 400);
    await archive(old.seriesId, 40);
    await archive(young.seriesId, 2);
    expect(await sweepRetention(tools(), new Date())).toBe(0);
    await setRetention(30);
    const removed = await sweepRetention(tools(), new Date());
    expect(removed).toBe(cited.runIds.length - 3 + old.runIds.length + 1);
    expect(await sweepRetention(tools(), new Date())).toBe(0);
    const left = await act((trx) => listArchivedSeries(trx, labId, { dueBefore: null, limit: 9 }));
    expect(left.map(({ seriesId, removable, cited: held }) => [seriesId, removable, held])).toEqual(
      [
        [cited.seriesId, 0, 3],
        [young.seriesId, young.runIds.length, 0],
      ],
    );
    const [event] = await act((trx) => listSeriesEvents(trx, labId, old.seriesId));
    expect(event).toMatchObject({
      act: "recordings.removed",
      accountId: null,
      details: { recordings: old.runIds.length + 1, reason: "30 days in the archive" },
    });
    await expect(act((trx) => loadSeriesFolder(trx, labId, old.seriesId, null))).rejects.toThrow(
      "removed for good",
    );
    await expect(act((trx) => restoreSeries(trx, all.scope, old.seriesId))).rejects.toMatchObject({
      code: "conflict.state",
    });
    expect(await store.has(stored)).toBe(true);
    await sweepFiles(tools(), new Date(Date.now() + 86_400_000));
    expect(await store.has(stored)).toBe(false);
  });

  it("is overruled by a person with a reason, for archived series alone, never for what another shows", async () => {
    const { seriesId, runIds } = await makeReviewableSeries(bench, all.scope);
    const other = await makeReviewableSeries(bench, all.scope);
    const remove = (id: string) =>
      act((trx) => removeRecordings(trx, all.scope, id, "the maker asked"));
    await expect(remove(seriesId)).rejects.toThrow("Archive it first");
    await act(async (trx) => {
      const [mine] = await listRuns(trx, labId, seriesId);
      const [theirs] = await listRuns(trx, labId, other.seriesId);
      await trx
        .updateTable("runs")
        .set({ digest: mine?.digest ?? "" })
        .where("id", "=", theirs?.id ?? "")
        .execute();
    });
    await archive(seriesId, 0);
    expect(await remove(seriesId)).toMatchObject({ recordings: runIds.length - 1, kept: 1 });
    await expect(remove(seriesId)).rejects.toThrow("stays");
  });

  it("keeps a lost row apart: the same bytes that come again are there again", async () => {
    const { seriesId } = await makeReviewableSeries(bench, all.scope);
    const [run] = await act((trx) => listRuns(trx, labId, seriesId));
    await archive(seriesId, 0);
    await act((trx) => removeRecordings(trx, all.scope, seriesId, "by mistake"));
    const fresh = await makeReviewableSeries(bench, all.scope);
    await act((trx) =>
      acceptRun(trx, all.scope, {
        seriesId: fresh.seriesId,
        slot: null,
        channel: 1,
        columns: null,
        fileName: "again and again.wav",
        digest: run?.digest ?? "",
        bytes: 100,
        media: "audio/wav",
      }),
    );
    const [again] = await act((trx) => listRuns(trx, labId, seriesId));
    expect(again?.removed_at).toBeNull();
  });
});

describe("a folder as a series", () => {
  it("gives the engine what the command has: names, order and result, byte for byte", async () => {
    const folder = join(root, "foreign");
    const amplitude = (levelDb: number): number => 0.3 * 10 ** ((levelDb - 102) / 20);
    writeSeriesFolder(folder, {
      levels: [86, 76, 96],
      lengthS: 2,
      device: (levelDb) => ({
        amplitudes: (f) => [amplitude(levelDb - Math.max(0, levelDb - 90) / (1 + (f / 150) ** 4))],
      }),
    });
    const inputs = await act(async (trx) => {
      const { seriesId, uploads } = await startFromFolder(trx, all.scope, {
        text: readSeriesText(folder),
        loudspeakerId: null,
        loudspeaker: { maker: "Foreign", model: "One", kind: "other" },
        microphoneDigest: null,
      });
      for (const { file, slot, channel, columns } of uploads) {
        const bytes = readFileSync(join(folder, file));
        const { runId } = await acceptRun(trx, all.scope, {
          seriesId,
          slot,
          channel,
          columns,
          fileName: file,
          digest: await put(bytes),
          bytes: bytes.length,
          media: "audio/wav",
        });
        await updateRun(trx, labId, runId, { state: "passed" });
      }
      return toAnalysisInputs(await loadCapture(trx, labId, seriesId));
    });
    const place = join(root, "as-stored");
    mkdirSync(place);
    for (const { file, digest: name } of inputs.files) {
      writeFileSync(join(place, file), readFileSync(await store.localPath(name)));
    }
    const [mine, theirs] = [
      await analyseSeries(inputs.series, createFolderSource(place)),
      await analyseSeries(parseSeries(readSeriesText(folder)), createFolderSource(folder)),
    ];
    expect(mine.runs.map(({ file }) => file)).toEqual(["86.wav", "76.wav", "96.wav"]);
    expect(toResultText(mine)).toBe(toResultText(theirs));
  });
});

describe("the export of a lab", () => {
  it("holds every table, every recording that is there, and a digest of each file; no secret", async () => {
    const { analysisId } = await makeReviewableSeries(bench, all.scope);
    const bytes = Buffer.alloc(200_000, 5);
    const stored = await put(bytes);
    await act((trx) =>
      sql`update recordings set removed_at = now() where digest =
        (select digest from recordings order by digest limit 1)`.execute(trx),
    );
    await act((trx) =>
      trx
        .insertInto("recordings")
        .values({ lab_id: labId, digest: stored, bytes: bytes.length, media: "audio/wav" })
        .execute(),
    );
    const entries = exportLab({ db: bench.app, store, scope: all.scope }, "own");
    const archived = unzip(Buffer.from(await new Response(makeZip(entries)).arrayBuffer()));
    const text = (name: string): string => archived.get(`own/${name}`)?.toString("utf8") ?? "";
    const sums = text("SHA256SUMS").trimEnd().split("\n");
    expect(sums).toHaveLength(archived.size - 1);
    for (const line of sums) {
      const content = archived.get(`own/${line.slice(66)}`) ?? Buffer.alloc(0);
      expect(digest(content)).toBe(line.slice(0, 64));
    }
    expect(archived.get(`own/recordings/${stored}.wav`)?.equals(bytes)).toBe(true);
    const manifest = JSON.parse(text("manifest.json")) as Record<string, unknown>;
    expect(manifest).toMatchObject({ format: "tidemark-lab-1", recordings: 1 });
    expect(manifest["removed_recordings"]).toHaveLength(1);
    const results = [...archived.keys()].filter((name) => name.includes("/results/"));
    expect(results).toHaveLength(1);
    expect(text("tables/analyses.ndjson")).toContain(analysisId);
    expect(text("members.json")).toContain(all.scope.accountId);
    for (const [name, content] of archived) {
      if (name.endsWith("json")) expect(content.toString("utf8")).not.toContain("token_hash");
    }
  });

  it("reads a long table in pages without losing or doubling a row", async () => {
    await act((trx) =>
      sql`insert into audit_events (lab_id, act, subject_type, subject_id, details)
        select ${labId}, 'x.y', 'lab', n::text, '{}' from generate_series(1, 1203) n`.execute(trx),
    );
    const entries = exportLab({ db: bench.app, store, scope: all.scope }, "own");
    const archived = unzip(Buffer.from(await new Response(makeZip(entries)).arrayBuffer()));
    const lines = archived.get("own/tables/audit_events.ndjson")?.toString("utf8") ?? "";
    const ids = lines
      .trimEnd()
      .split("\n")
      .map((line) => (JSON.parse(line) as { id: number }).id);
    expect(new Set(ids).size).toBe(ids.length);
    expect(ids.length).toBeGreaterThanOrEqual(1204);
  });

  it("names every table of a lab, to be taken along or left with a reason", async () => {
    const { rows } = await sql<{ name: string }>`select c.relname as name
      from pg_class c join pg_attribute a on a.attrelid = c.oid
      where c.relkind = 'r' and c.relnamespace = 'public'::regnamespace
        and a.attname = 'lab_id' and not a.attisdropped order by 1`.execute(bench.app);
    expect([...Object.keys(EXPORTED_TABLES), ...Object.keys(LEFT_OUT_TABLES)].toSorted()).toEqual(
      rows.map(({ name }) => name).toSorted(),
    );
  });
});
