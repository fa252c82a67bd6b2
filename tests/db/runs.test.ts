import { randomUUID } from "node:crypto";
import { beforeAll, beforeEach, describe, expect, it } from "vitest";
import { loadCapture } from "../../db/acts/capture";
import { actOnRun } from "../../db/acts/act-on-run";
import { recheckNeighbours } from "../../db/acts/recheck-levels";
import type { Trx } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { dropRecording, findUnheldDigests, keepRecording } from "../../db/queries/recordings";
import {
  assignRun,
  createRun,
  findDuplicates,
  findForgottenChecks,
  getRun,
  listExcuses,
  listRuns,
  type NewRun,
  saveReport,
  setExcuse,
  updateRun,
} from "../../db/queries/runs";
import { deleteSeries } from "../../db/queries/series";
import {
  createUpload,
  deleteUpload,
  findExpiredUploads,
  finishUpload,
  listUploads,
  setReceived,
} from "../../db/queries/uploads";
import type { ArrivalReport } from "../../lib/runs/arrival-schema";
import { type Lab, makeLab, makeSeries, openDatabase } from "./support";

const bench = openDatabase();
let lab: Lab;
let series: Awaited<ReturnType<typeof makeSeries>>;

const REPORT: ArrivalReport = {
  engine_version: "1",
  format: "WAV",
  rate_Hz: 48_000,
  channels: 1,
  channel: 1,
  bits: 24,
  length_s: 12.9,
  peak_dBFS: -12,
  rms_dBFS: -24,
  measured_level_dB: 76,
  snr_dB: 60,
  latency_s: 0.3,
  drift_ppm: 1,
  envelope: { from_s: 0, to_s: 12.9, low: [-0.1], high: [0.1], from_Hz: null, to_Hz: null },
  checks: [],
};

const act = <T>(run: (trx: Trx) => Promise<T>): Promise<T> => inLab(bench.app, lab.admin, run);

const newRun = (change: Partial<NewRun> = {}): NewRun => ({
  seriesId: series.seriesId,
  slot: "short-76",
  role: "short-term",
  levelDb: 76,
  variant: null,
  fileName: "a.wav",
  digest: series.digest,
  channel: 1,
  uploadedBy: lab.admin.accountId,
  uploadedByToken: null,
  ...change,
});

beforeAll(async () => {
  lab = await makeLab(bench, "runs");
});

beforeEach(async () => {
  series = await makeSeries(bench, lab);
});

const states = async () =>
  (await act((trx) => listRuns(trx, lab.id, series.seriesId))).map((run) => [run.take, run.state]);

describe("a slot", () => {
  it("holds one live take; the one before is replaced", async () => {
    await act((trx) => createRun(trx, lab.id, newRun()));
    await act((trx) => createRun(trx, lab.id, newRun()));
    expect(await states()).toEqual([
      [1, "replaced"],
      [2, "replaced"],
      [3, "checking"],
    ]);
  });

  it("never holds two live takes, whoever comes at the same moment", async () => {
    const tries = await Promise.allSettled(
      Array.from({ length: 4 }, () => act((trx) => createRun(trx, lab.id, newRun()))),
    );
    expect(tries.some((outcome) => outcome.status === "fulfilled")).toBe(true);
    const live = (await states()).filter(([, state]) => state === "checking");
    expect(live).toHaveLength(1);
  });

  it("takes a waiting file as its newest take and keeps an excluded one", async () => {
    await act((trx) =>
      updateRun(trx, lab.id, series.runId, { state: "excluded", reason: "door slammed" }),
    );
    const waiting = await act((trx) =>
      createRun(trx, lab.id, newRun({ slot: null, role: null, levelDb: null })),
    );
    await act((trx) =>
      assignRun(
        trx,
        lab.id,
        { id: waiting, seriesId: series.seriesId },
        {
          slot: "short-76",
          role: "short-term",
          levelDb: 76,
          variant: null,
        },
      ),
    );
    expect(await states()).toEqual([
      [1, "excluded"],
      [2, "checking"],
    ]);
    expect(await act((trx) => getRun(trx, lab.id, waiting))).toMatchObject({
      slot: "short-76",
      level_db: 76,
      bytes: 100,
      uploadedByName: "admin@runs.test",
    });
  });

  it.each(["kept", "excluded"] as const)("wants a reason for %s", async (state) => {
    await expect(act((trx) => updateRun(trx, lab.id, series.runId, { state }))).rejects.toThrow(
      /runs_check/,
    );
  });

  it("is excused with a reason and asked for again", async () => {
    const excuse = (reason: string | null) =>
      act((trx) =>
        setExcuse(trx, lab.id, lab.admin.accountId, {
          seriesId: series.seriesId,
          slot: "ambient",
          reason,
        }),
      );
    const reasons = async () =>
      (await act((trx) => listExcuses(trx, lab.id, series.seriesId))).map((row) => row.reason);
    await excuse("quiet");
    await excuse("quiet at night");
    expect(await reasons()).toEqual(["quiet at night"]);
    await excuse(null);
    expect(await reasons()).toEqual([]);
  });
});

describe("the checks", () => {
  it("write their report once, and not over a person's act", async () => {
    const save = (runId: string, channel = 1) =>
      act((trx) =>
        saveReport(
          trx,
          lab.id,
          { runId, channel, slot: "short-76" },
          { state: "failed", report: REPORT },
        ),
      );
    expect(await save(series.runId, 2)).toBe(false);
    expect(await save(series.runId)).toBe(true);
    expect(await save(series.runId)).toBe(false);
    expect((await act((trx) => getRun(trx, lab.id, series.runId))).report).toEqual(REPORT);
    const next = await act((trx) => createRun(trx, lab.id, newRun()));
    await act((trx) => updateRun(trx, lab.id, next, { state: "excluded", reason: "no" }));
    expect(await save(next)).toBe(false);
  });

  it("that nobody finished are found", async () => {
    const found = async (seconds: number) =>
      (await findForgottenChecks(bench.app, seconds)).some((row) => row.runId === series.runId);
    expect(await found(60)).toBe(false);
    expect(await found(0)).toBe(true);
  });

  it("see the same bytes under another name", async () => {
    const twin = await act((trx) =>
      createRun(trx, lab.id, newRun({ slot: "short-86", levelDb: 86, fileName: "b.wav" })),
    );
    const run = { id: twin, seriesId: series.seriesId, digest: series.digest };
    expect(await act((trx) => findDuplicates(trx, lab.id, run))).toEqual([
      { id: series.runId, slot: "short-76", fileName: "osier5a_76_short.wav" },
    ]);
  });
});

describe("recordings", () => {
  it("are asked for over all labs, and held ones are never given away", async () => {
    const other = await makeLab(bench, `holder-${randomUUID().slice(0, 8)}`);
    const theirs = "e".repeat(64);
    const nobodys = "f".repeat(64);
    await inLab(bench.app, other.admin, (trx) =>
      keepRecording(trx, other.id, { digest: theirs, bytes: 1, media: "audio/wav" }),
    );
    expect(await findUnheldDigests(bench.app, [series.digest, theirs, nobodys])).toEqual([nobodys]);
    await inLab(bench.app, other.admin, (trx) => dropRecording(trx, other.id, theirs));
    expect(await findUnheldDigests(bench.app, [theirs])).toEqual([theirs]);
  });

  it("of a run cannot go, nor the series of a run", async () => {
    await expect(act((trx) => dropRecording(trx, lab.id, series.digest))).rejects.toThrow(
      /foreign key/,
    );
    await expect(act((trx) => deleteSeries(trx, lab.id, series.seriesId))).rejects.toThrow(
      /foreign key/,
    );
  });
});

describe("an upload", () => {
  it("is listed until finished, and found once its day is over", async () => {
    const id = `up-${randomUUID()}`;
    const create = (expiresAt: Date, uploadId = id) =>
      act((trx) =>
        createUpload(trx, lab.id, {
          id: uploadId,
          seriesId: series.seriesId,
          slot: "short-86",
          channel: 2,
          fileName: "b.wav",
          bytes: 5_000_000_000,
          accountId: lab.admin.accountId,
          tokenId: null,
          expiresAt,
        }),
      );
    await create(new Date(Date.now() + 60_000));
    await act((trx) => setReceived(trx, lab.id, id, 4_999_999_999));
    expect(await act((trx) => listUploads(trx, lab.id, series.seriesId))).toMatchObject([
      { id, received: 4_999_999_999, bytes: 5_000_000_000, channel: 2 },
    ]);
    await expect(act((trx) => setReceived(trx, lab.id, id, 5_000_000_001))).rejects.toThrow(
      /uploads_check/,
    );
    await act((trx) => finishUpload(trx, lab.id, id, series.runId));
    expect(await act((trx) => listUploads(trx, lab.id, series.seriesId))).toEqual([]);
    const late = `late-${randomUUID()}`;
    await create(new Date(Date.now() - 1000), late);
    const expired = await findExpiredUploads(bench.app);
    expect(expired).toContainEqual({ labId: lab.id, uploadId: late });
    expect(expired.map((row) => row.uploadId)).not.toContain(id);
    await act((trx) => deleteUpload(trx, lab.id, late));
    expect(await findExpiredUploads(bench.app)).not.toContainEqual({
      labId: lab.id,
      uploadId: late,
    });
  });
});

describe("a new take beside others", () => {
  const check = (code: "level-step" | "hum", verdict: "pass" | "fail"): ArrivalReport => ({
    ...REPORT,
    checks: [
      {
        code,
        verdict,
        title: "",
        finding: "",
        spoils: "",
        remedy: "",
        figure: null,
        where: null,
        bands_Hz: [],
      },
    ],
  });
  const add = async (
    trx: Trx,
    levelDb: number,
    state: "failed" | "kept",
    report: ArrivalReport,
  ): Promise<string> => {
    const slot = `short-${levelDb}`;
    const id = await createRun(trx, lab.id, newRun({ slot, levelDb }));
    await saveReport(trx, lab.id, { runId: id, channel: 1, slot }, { state: "failed", report });
    if (state === "kept") {
      const by = lab.admin.accountId;
      await updateRun(trx, lab.id, id, { state, reason: "no time left", reason_by: by });
    }
    return id;
  };

  it("has those checked again that spoke up beside the one before, and no others", async () => {
    await act(async (trx) => {
      const step = await add(trx, 86, "failed", check("level-step", "fail"));
      await add(trx, 92, "failed", check("hum", "fail"));
      await add(trx, 96, "failed", check("level-step", "pass"));
      await add(trx, 99, "kept", check("level-step", "fail"));
      const fresh = await add(trx, 76, "failed", check("level-step", "fail"));
      const capture = await loadCapture(trx, lab.id, series.seriesId);
      expect(await recheckNeighbours(trx, lab.id, capture, fresh)).toEqual([step]);
      expect((await getRun(trx, lab.id, step)).state).toBe("checking");
      expect((await getRun(trx, lab.id, fresh)).state).toBe("failed");
    });
  });

  it("that is put aside, or brought back, has them checked again as well", async () => {
    await act(async (trx) => {
      const bad = await add(trx, 86, "failed", check("hum", "fail"));
      const beside = await add(trx, 92, "failed", check("level-step", "fail"));
      const exclude = { act: "exclude", reason: "a door was slammed" } as const;
      expect((await actOnRun(trx, lab.admin, bad, exclude)).runIds).toEqual([beside]);
      expect((await getRun(trx, lab.id, beside)).state).toBe("checking");
      const report = check("level-step", "fail");
      const now = { runId: beside, channel: 1, slot: "short-92" };
      await saveReport(trx, lab.id, now, { state: "failed", report });
      expect((await actOnRun(trx, lab.admin, bad, { act: "bring-back" })).runIds).toEqual([beside]);
    });
  });
});
