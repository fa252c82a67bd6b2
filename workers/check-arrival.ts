/** The job that checks an arrived recording: load, compute, save with what follows from it. */
import { recordEvent } from "../db/queries/audit";
import { getLab } from "../db/queries/labs";
import { getRun, saveReport, type RunRow } from "../db/queries/runs";
import { lockSeries } from "../db/queries/series";
import { loadCapture, type Capture } from "../db/acts/capture";
import { recheckLevels, recheckNeighbours } from "../db/acts/recheck-levels";
import { settleSeries } from "../db/acts/settle-series";
import { inLab } from "../db/in-lab";
import { ENGINE_VERSION } from "../lib/analysis/engine-version";
import { AppError } from "../lib/errors/app-error";
import { checkArrivalPayloadSchema, type CheckArrivalPayload } from "../lib/jobs/check-arrival";
import { labSettingsSchema } from "../lib/labs/settings-schema";
import type { ArrivalReport } from "../lib/runs/arrival-schema";
import { toBrokenReport } from "../lib/runs/arrival/broken-report";
import { toVerdict } from "../lib/runs/arrival/verdict";
import { isLive } from "../lib/runs/ladder";
import type { CheckTask } from "./compute/messages";
import { follow, workerScope, type JobTools } from "./tools";

/** Channel or place may change while a check runs; then it is made once more, within reason. */
const MOST_ROUNDS = 5;

export async function checkArrivalJob(tools: JobTools, data: unknown): Promise<void> {
  const payload = checkArrivalPayloadSchema.parse(data);
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    const work = await load(tools, payload);
    if (work === null) return;
    const report = await tools.child.run(work.task);
    if (await save(tools, payload, work.run, report)) return;
  }
}

/** Called when no try is left: the take cannot stay in the state `checking` for ever. */
export async function giveUpCheck(tools: JobTools, data: unknown, error: unknown): Promise<void> {
  const payload = checkArrivalPayloadSchema.parse(data);
  const report = toBrokenReport(error, ENGINE_VERSION);
  const run = await inLab(tools.db, workerScope(payload.labId), (trx) =>
    getRun(trx, payload.labId, payload.runId),
  );
  await save(tools, payload, run, report);
}

interface Work {
  run: RunRow;
  task: CheckTask;
}

/** @returns null where nothing is left to check. */
async function load(tools: JobTools, { labId, runId }: CheckArrivalPayload): Promise<Work | null> {
  const found = await inLab(tools.db, workerScope(labId), async (trx) => {
    const run = await getRun(trx, labId, runId).catch((error: unknown) => {
      // Removed by its tester before we came to it.
      if (error instanceof AppError && error.code === "not-found") return null;
      throw error;
    });
    if (run === null || run.state !== "checking") return null;
    const capture = await loadCapture(trx, labId, run.series_id);
    const { settings } = await getLab(trx, labId);
    return { run, capture, limits: labSettingsSchema.parse(settings).arrival };
  });
  if (found === null) return null;
  const { run, capture, limits } = found;
  const request = toRequest(run, capture, limits);
  const digests = new Set([
    run.digest,
    ...request.siblings.map((sibling) => sibling.digest),
    ...(request.plan.microphone === null ? [] : [request.plan.microphone.digest]),
  ]);
  const paths: Record<string, string> = {};
  for (const digest of digests) {
    // A sibling that is missing is its own trouble, not that of this take.
    if (digest === run.digest || (await tools.store.has(digest))) {
      paths[digest] = await tools.store.localPath(digest);
    }
  }
  return { run, task: { kind: "check", request, paths } };
}

function toRequest(
  run: RunRow,
  { series, planned, runs }: Capture,
  limits: CheckTask["request"]["limits"],
): CheckTask["request"] {
  const placeOf = (slot: string | null) => planned.find((p) => p.slot === slot) ?? null;
  const order = (slot: string | null): number => {
    const at = planned.findIndex((p) => p.slot === slot);
    return at < 0 ? planned.length : at;
  };
  return {
    run: {
      file: run.file_name,
      digest: run.digest,
      channel: run.channel,
      columns: run.columns ?? undefined,
      place: placeOf(run.slot),
    },
    plan: series.plan,
    limits,
    engineVersion: ENGINE_VERSION,
    siblings: runs
      .filter((other) => other.id !== run.id && isLive(other.state))
      .sort((a, b) => order(a.slot) - order(b.slot))
      .map((other) => ({
        file: other.file_name,
        digest: other.digest,
        channel: other.channel,
        place: placeOf(other.slot),
        state: other.state,
        report: other.report,
      })),
  };
}

/** @returns false where the run is to be checked once more. */
async function save(
  tools: JobTools,
  { labId, runId }: CheckArrivalPayload,
  run: RunRow,
  report: ArrivalReport,
): Promise<boolean> {
  const scope = workerScope(labId);
  const state = toVerdict(report);
  const outcome = await inLab(tools.db, scope, async (trx) => {
    await lockSeries(trx, labId, run.series_id);
    const checked = { runId, channel: run.channel, slot: run.slot };
    if (!(await saveReport(trx, labId, checked, { state, report }))) {
      const now = await getRun(trx, labId, runId);
      return { done: now.state !== "checking", followUp: null };
    }
    const capture = await loadCapture(trx, labId, run.series_id);
    await recordEvent(trx, scope, {
      act: "run.checked",
      subjectType: "run",
      subjectId: runId,
      seriesId: run.series_id,
      details: {
        file: run.file_name,
        label: capture.planned.find((p) => p.slot === run.slot)?.label ?? null,
        state,
        failed: report.checks.filter((c) => c.verdict === "fail").map((c) => c.code),
      },
    });
    const calibrator = run.role === "calibrator-before" || run.role === "calibrator-after";
    // Once, when the take is new: two runs that contradict each other would go on for ever.
    const isNew = run.report === null && run.slot !== null;
    const stale = calibrator
      ? await recheckLevels(trx, labId, capture)
      : isNew
        ? await recheckNeighbours(trx, labId, capture, runId)
        : [];
    const followUp = await settleSeries(trx, scope, run.series_id);
    return { done: true, followUp: { ...followUp, runIds: [...stale, ...followUp.runIds] } };
  });
  if (outcome.followUp !== null) await follow(tools, outcome.followUp);
  return outcome.done;
}
