import type { Trx } from "../../../db/client";
import { countCaptured, loadCapture, toMaxLevelDb } from "../../../db/acts/capture";
import { findCurrentAnalysis } from "../../../db/queries/current-analysis";
import { countDecided } from "../../../db/queries/decisions";
import { getLab } from "../../../db/queries/labs";
import { findStandingSignOff } from "../../../db/queries/sign-offs";
import { listPublications } from "../../../db/queries/publications";
import { toSeriesNumber } from "../../../db/queries/series";
import type { SeriesListRow } from "../../../db/queries/series-list";
import type { Progress, SeriesRow, SeriesView } from "../../../lib/api/series";
import { USABLE_RUN_STATES } from "../../../lib/runs/arrival-schema";
import { toFileStem, toPlannedRuns } from "../../../lib/series/planned-runs";
import { toBandsWords, toSeriesSteps } from "../../../lib/series/states";
import { toDay } from "../../../lib/time/time-words";
import { toLoudspeakerView } from "./loudspeaker-view";
import { toPerson } from "./person-view";

/** @throws AppError "not-found" */
export async function loadSeriesView(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<SeriesView> {
  const capture = await loadCapture(trx, labId, seriesId);
  const { series, planned, runs } = capture;
  const current = await findCurrentAnalysis(trx, labId, seriesId);
  const done = await findCurrentAnalysis(trx, labId, seriesId, "done");
  const signOff = await findStandingSignOff(trx, labId, seriesId);
  const reviewed = signOff?.analysis_id ?? done?.id ?? null;
  const bands =
    reviewed === null ? undefined : (await countDecided(trx, labId, [reviewed])).get(reviewed);
  const last = runs.at(-1);
  const zone = (await getLab(trx, labId)).time_zone;
  const toNote = (at: Date, name: string | null): string =>
    [toDay(at, new Date(), zone), ...(name === null ? [] : [name])].join(", ");
  const live = (await listPublications(trx, labId, seriesId)).find((one) => one.state === "live");
  const steps = toSeriesSteps({
    begun: runs.length > 0 || capture.excuses.size > 0,
    captured: countCaptured(capture),
    planned: planned.length,
    analysis: current === null || current.state === "cancelled" ? null : current.state,
    signedOff: signOff !== null,
    signedOffNote: signOff === null ? null : toNote(new Date(signOff.at), signOff.by.name),
    bands: bands ?? { total: 0, decided: 0 },
    progress: toShare(current?.progress ?? null),
    capturedNote: last === undefined ? null : toNote(last.uploaded_at, last.uploadedByName),
    analysedNote:
      done?.finished_at == null
        ? null
        : `${toDay(done.finished_at, new Date(), zone)}, version ${String(done.version)}`,
    publishedNote: live === undefined ? null : toNote(live.published_at, live.publishedByName),
  });
  return {
    id: series.id,
    number: toSeriesNumber(series.number),
    loudspeaker: toLoudspeakerView(capture.loudspeaker),
    state: series.state,
    steps,
    plan: series.plan,
    plan_version: series.plan_version,
    plan_locked: runs.length > 0,
    planned_runs: planned,
    failure: series.failure,
    latest_done_analysis: done === null ? null : { id: done.id, version: done.version },
    latest_analysis:
      current === null ? null : { id: current.id, version: current.version, state: current.state },
    max_level_dB: toMaxLevelDb(runs),
    created_at: series.created_at.toISOString(),
    created_by: toPerson(series.created_by, series.createdByName),
    changed_at: series.changed_at.toISOString(),
    archived_at: series.archived_at?.toISOString() ?? null,
  };
}

/** @param progress of its analysis, while one is under way. */
export function toSeriesRow(row: SeriesListRow, progress: Progress | null): SeriesRow {
  const slots = [
    ...toPlannedRuns(row.plan, toFileStem(row.loudspeaker.model)).map((run) => run.slot),
    ...row.requestedSlots,
  ];
  const usable = row.liveRuns.filter((run) => USABLE_RUN_STATES.includes(run.state));
  const settled = new Set([...usable.map((run) => run.slot), ...row.excusedSlots]);
  const captured = slots.filter((slot) => settled.has(slot)).length;
  const levels = row.liveRuns.flatMap((run) => (run.levelDb === null ? [] : [run.levelDb]));
  return {
    id: row.id,
    number: toSeriesNumber(row.number),
    loudspeaker: row.loudspeaker,
    state: row.state,
    state_detail: toStateDetail(row, captured, slots.length, progress),
    levels_dB: row.plan.levels.map((level) => level.level_dB).sort((a, b) => a - b),
    captured,
    planned: slots.length,
    limits: row.listSummary?.limits ?? [],
    max_level_dB: levels.length === 0 ? null : Math.max(...levels),
    with: row.changedBy,
    changed_at: row.changedAt.toISOString(),
  };
}

function toStateDetail(
  { state, bands, published }: Pick<SeriesListRow, "state" | "bands" | "published">,
  captured: number,
  planned: number,
  progress: Progress | null,
): string {
  const recordings = `${captured} of ${planned} recordings`;
  const details: Record<SeriesRow["state"], string> = {
    planned: `${planned} recordings planned`,
    capturing: recordings,
    analysing: progress === null ? "waits for a worker" : toRunWords(progress),
    "analysis failed": "needs tester",
    "in review": toBandsWords(bands),
    "signed off": published ? "published" : "not published",
  };
  return details[state];
}

/** "run 3 of 6", then "levels and onset". */
function toRunWords(progress: Progress): string {
  const open = progress.runs.findIndex((run) => run.stages.some((s) => s.state !== "done"));
  return open < 0 ? "levels and onset" : `run ${open + 1} of ${progress.runs.length}`;
}

const toShare = (progress: Progress | null): number =>
  progress === null || progress.total === 0 ? 0 : Math.min(1, progress.done / progress.total);
