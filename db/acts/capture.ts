/** A series with everything that its capture rules look at, read in one transaction. */
import type { ArrivalReport } from "../../lib/runs/arrival-schema";
import { USABLE_RUN_STATES } from "../../lib/runs/arrival-schema";
import { toLadder, type LadderSlot } from "../../lib/runs/ladder";
import { toFileStem, toPlannedRuns, type PlannedRun } from "../../lib/series/planned-runs";
import type { SeriesSource } from "../../lib/series/to-series-json";
import type { Trx } from "../client";
import { getLoudspeaker, type LoudspeakerRow } from "../queries/loudspeakers";
import { listRequestedRuns } from "../queries/run-requests";
import { listExcuses, listRuns, type RunRow } from "../queries/runs";
import { getSeries, type SeriesWithNames } from "../queries/series";

export interface Capture {
  series: SeriesWithNames;
  loudspeaker: LoudspeakerRow;
  /** In capture order. */
  planned: PlannedRun[];
  /** Every take, in the order in which they came. */
  runs: RunRow[];
  /** Reason by slot. */
  excuses: ReadonlyMap<string, string>;
  ladder: LadderSlot[];
}

/** @throws AppError "not-found" */
export async function loadCapture(trx: Trx, labId: string, seriesId: string): Promise<Capture> {
  const series = await getSeries(trx, labId, seriesId);
  const loudspeaker = await getLoudspeaker(trx, labId, series.loudspeaker_id);
  const requested = await listRequestedRuns(trx, labId, seriesId);
  const planned = toPlannedRuns(series.plan, toFileStem(loudspeaker.model), requested);
  const runs = await listRuns(trx, labId, seriesId);
  const rows = await listExcuses(trx, labId, seriesId);
  const excuses = new Map(rows.map((row) => [row.slot, row.reason]));
  return { series, loudspeaker, planned, runs, excuses, ladder: toLadder(planned, runs, excuses) };
}

/** Places of the plan that have a usable recording or an excuse. */
export const countCaptured = (capture: Pick<Capture, "ladder">): number =>
  capture.ladder.filter((slot) => slot.settled).length;

/** What would enter an analysis now: the usable recording of each place, in the order of the plan. */
export function toSeriesSource({ series, loudspeaker, planned, runs }: Capture): SeriesSource {
  return {
    loudspeaker: {
      maker: loudspeaker.maker,
      model: loudspeaker.model,
      largestDimensionM: loudspeaker.largest_dimension_m,
      tuningHz: loudspeaker.tuning_hz,
    },
    plan: series.plan,
    runs: planned.flatMap((place) => {
      const run = runs.find((r) => r.slot === place.slot && USABLE_RUN_STATES.includes(r.state));
      if (run === undefined) return [];
      return [
        {
          id: run.id,
          role: place.role,
          levelDb: place.levelDb,
          variant: place.variant,
          file: toStoredName(place, run.file_name),
          digest: run.digest,
          channel: run.channel,
          columns: run.columns,
        },
      ];
    }),
  };
}

/** The planned name with the ending of what came: a FLAC or a table is known by it. */
function toStoredName(place: PlannedRun, uploadedName: string): string {
  const ending = /\.([A-Za-z0-9]{2,5})$/.exec(uploadedName)?.[1]?.toLowerCase() ?? "wav";
  return place.fileName.replace(/\.wav$/, `.${ending}`);
}

/** Loudest level that was recorded, dB SPL at 1 m; null before the first. */
export function toMaxLevelDb(
  runs: readonly {
    state: string;
    level_db: number | null;
    report: Pick<ArrivalReport, "measured_level_dB"> | null;
  }[],
): number | null {
  const levels = runs
    .filter((run) => run.state !== "excluded" && run.state !== "replaced")
    .flatMap((run) => (run.level_db === null ? [] : [run.level_db, run.report?.measured_level_dB]))
    .filter((level) => level !== null && level !== undefined);
  return levels.length === 0 ? null : Math.max(...levels);
}
