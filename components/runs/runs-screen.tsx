"use client";

import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { ApiProblem } from "@/lib/api/client";
import type { SeriesView } from "@/lib/api/series";
import { formatFrequency, formatPlain, NBSP } from "@/lib/charts/format";
import type { PlannedRun } from "@/lib/series/planned-runs";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { LoadingState } from "../parts/states";
import {
  runsQuery,
  useActOnRun,
  useExcuseSlot,
  useRemoveRun,
  useRemoveUpload,
} from "../queries/runs";
import { seriesQuery } from "../queries/series";
import { useSeriesEvents } from "../queries/use-series-events";
import { DropZone } from "./drop-zone";
import { LostConnection } from "./lost-connection";
import { PlaceDialog } from "./place-dialog";
import { isClear, placeFiles, type PlacedFile } from "./place-files";
import type { RunActs } from "./run-acts";
import { RunLadder } from "./run-ladder";
import { toRunTable } from "./run-rows";
import { RunsFoot } from "./runs-foot";
import { RunsTable } from "./runs-table";
import { UnassignedFiles } from "./unassigned-files";
import { removeUpload } from "./tus-transfer";
import { useColumns } from "./use-columns";
import { useUploads } from "./use-uploads";

interface RunsScreenProps {
  seriesId: string;
  mayCapture: boolean;
  mayAnalyse: boolean;
}

/** Files arrive, are matched and checked; the tester sees at once what must be repeated. */
export function RunsScreen({ seriesId, mayCapture, mayAnalyse }: RunsScreenProps) {
  const series = useQuery(seriesQuery(seriesId));
  // The frame of the series says what is wrong where it cannot be read.
  if (series.data === undefined) return null;
  return <Runs series={series.data} mayCapture={mayCapture} mayAnalyse={mayAnalyse} />;
}

interface RunsProps {
  series: SeriesView;
  mayCapture: boolean;
  mayAnalyse: boolean;
}

function Runs({ series, mayCapture, mayAnalyse }: RunsProps) {
  const live = useSeriesEvents(series.id);
  const list = useQuery(runsQuery(series.id, live));
  const { uploads, controller } = useUploads(series.id);
  const actOnRun = useActOnRun(series.id);
  const excuseSlot = useExcuseSlot(series.id);
  const removeRun = useRemoveRun(series.id);
  const removeLeft = useRemoveUpload(series.id, removeUpload);
  const { ask, dialog } = useColumns((files) => controller.add(files));
  const [placed, setPlaced] = useState<PlacedFile[] | null>(null);
  const planned: PlannedRun[] = series.planned_runs;
  const mayWrite = mayCapture && series.archived_at === null;

  if (list.data === undefined) {
    return (
      <div className="px-gutter max-md:px-phone">
        {list.isError ? (
          <FaultBar
            title="The recordings could not be read"
            actions={<Button onClick={() => void list.refetch()}>Try again</Button>}
          >
            {list.error.message}
          </FaultBar>
        ) : (
          <LoadingState label="Loading the recordings" onRetry={() => void list.refetch()} />
        )}
      </div>
    );
  }

  const { runs, slots, captured, stop_rule: stopRule } = list.data;
  const table = toRunTable({ planned, runs, slots, uploads });
  const rows = table.groups.flatMap((group) => group.rows);
  const unfinished = list.data.uploads.filter(
    (there) => !uploads.some((here) => here.fileName === there.file_name),
  );
  const acts: RunActs = {
    act: async (run, act) => void (await actOnRun.mutateAsync({ runId: run.id, act })),
    replace: (row, files) =>
      ask(files.map((file) => ({ file, slot: row.planned.slot, shownSlot: row.planned.slot }))),
    excuse: async (row, reason) =>
      void (await excuseSlot.mutateAsync({ slot: row.planned.slot, reason })),
    remove: async (run) => void (await removeRun.mutateAsync(run.id)),
    stopUpload: (id) => void controller.stop(id),
    goOnUpload: (id) => controller.goOn(id),
    discardUpload: (id) => void controller.discard(id),
    removeUpload: (id) => removeLeft.mutateAsync(id),
  };
  const take = (files: File[]): void => {
    const found = placeFiles(files, planned);
    if (!isClear(found, rows)) {
      setPlaced(found);
      return;
    }
    ask(found.map(({ file, slot }) => ({ file, slot: null, shownSlot: slot })));
  };
  const lost = list.isRefetchError && list.error instanceof ApiProblem && list.error.status === 0;

  return (
    <div className="px-gutter pb-8 max-md:px-phone">
      {(lost || list.fetchStatus === "paused") && (
        <LostConnection
          sinceMs={list.dataUpdatedAt}
          waiting={uploads.length}
          onRetry={() => void list.refetch()}
        />
      )}
      {mayWrite ? (
        <DropZone seriesId={series.id} rateHz={series.plan.sweep.rate_Hz} onFiles={take}>
          <RunLadder rows={rows} />
        </DropZone>
      ) : (
        <div className="border border-rule bg-sheet px-6 py-3.5">
          <RunLadder rows={rows} />
        </div>
      )}
      {stopRule !== null && (
        <FaultBar className="mt-4" title="Do not go louder">
          {stopRule}
        </FaultBar>
      )}
      <div className="mt-4 max-md:-mx-phone">
        <RunsTable
          table={table}
          calibrator={toCalibratorWords(series)}
          mayCapture={mayWrite}
          acts={acts}
        />
        <UnassignedFiles
          unassigned={table.unassigned}
          loose={table.loose}
          unfinished={unfinished}
          rows={rows}
          mayCapture={mayWrite}
          acts={acts}
        />
      </div>
      <RunsFoot
        series={series}
        captured={captured}
        planned={list.data.planned}
        mayAnalyse={mayAnalyse && series.archived_at === null}
      />
      {placed !== null && (
        <PlaceDialog placed={placed} rows={rows} onSend={ask} onClose={() => setPlaced(null)} />
      )}
      {dialog}
    </div>
  );
}

function toCalibratorWords({ plan }: SeriesView): string {
  return `${formatPlain(plan.calibration.level_dB)}${NBSP}dB, ${formatFrequency(plan.calibration.frequency_Hz)}`;
}
