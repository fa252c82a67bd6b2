"use client";

import { useQuery } from "@tanstack/react-query";
import { parseAsBoolean, useQueryState } from "nuqs";
import { ApiProblem } from "@/lib/api/client";
import type { AnalysisView } from "@/lib/api/analyses";
import { analysisQuery, resultQuery } from "../queries/analyses";
import { findLoadFailure } from "../queries/load-failure";
import { reviewQuery } from "../queries/review";
import { runsQuery } from "../queries/runs";
import { seriesQuery } from "../queries/series";
import { useSeriesEvents } from "../queries/use-series-events";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { AnalysisProgress } from "./analysis-progress";
import { AnalysisFailed } from "./analysis-failed";
import { EmptyWall } from "./empty-wall";
import { RunStrip } from "./run-strip";
import { Workspace } from "./workspace";

interface OutputLimitViewProps {
  seriesId: string;
  /** The caller may start an analysis and replace recordings. */
  mayAnalyse: boolean;
  /** The caller decides bands, asks for runs and signs off. */
  mayDecide: boolean;
}

/** The workspace of a series: what it reached in every band, what gave out and why. */
export function OutputLimitView({ seriesId, mayAnalyse, mayDecide }: OutputLimitViewProps) {
  const live = useSeriesEvents(seriesId);
  const series = useQuery(seriesQuery(seriesId));
  const runs = useQuery(runsQuery(seriesId, live));
  const latest = series.data?.latest_analysis ?? null;
  const done = series.data?.latest_done_analysis ?? null;
  const analysis = useQuery({
    ...analysisQuery(latest?.id ?? "", seriesId, live),
    enabled: latest !== null,
  });
  const [showSigned, setShowSigned] = useQueryState("signed", parseAsBoolean.withDefault(false));
  const newest = useQuery({
    ...reviewQuery(done?.id ?? "", seriesId, live),
    enabled: done !== null,
  });
  // While a version is signed off, a newer one may stand beside it.
  const signed = showSigned ? (newest.data?.sign_off ?? null) : null;
  const shown =
    signed === null ? done : { id: signed.analysis_id, version: signed.analysis_version };
  const result = useQuery({ ...resultQuery(shown?.id ?? ""), enabled: shown !== null });
  const review = useQuery({
    ...reviewQuery(shown?.id ?? "", seriesId, live),
    enabled: shown !== null,
  });

  const failure = findLoadFailure([series, runs, result, review]);
  if (failure !== null) return <LoadFault error={failure.error} onRetry={failure.retry} />;
  const waits = done !== null && (result.data === undefined || review.data === undefined);
  if (series.data === undefined || waits) {
    return <LoadingState label="Loading the output limit" figure={<EmptyWall />} />;
  }
  const frame = (
    <EmptyWall
      levelsDb={series.data.plan.levels.map((level) => level.level_dB)}
      startHz={series.data.plan.sweep.start_Hz}
      stopHz={series.data.plan.sweep.stop_Hz}
    />
  );
  const open = analysis.data !== undefined && isOpen(analysis.data) ? analysis.data : null;
  return (
    <>
      <RunStrip series={series.data} runs={runs.data?.runs ?? []} />
      {open !== null && (
        <section className="mt-5 border border-rule bg-sheet px-6 py-5 max-md:px-phone">
          {result.data === undefined && frame}
          <AnalysisProgress analysis={open} />
        </section>
      )}
      {series.data.state === "analysis failed" && series.data.failure !== null && (
        <AnalysisFailed seriesId={seriesId} failure={series.data.failure} mayAct={mayAnalyse} />
      )}
      {result.data !== undefined && review.data !== undefined && shown !== null ? (
        <Workspace
          // Another version starts with its own decisions and nothing to undo.
          key={shown.id}
          series={series.data}
          result={result.data}
          review={review.data}
          version={shown.version}
          watched={latest?.id === shown.id && open === null}
          mayDecide={mayDecide}
          onShowSigned={(on) => void setShowSigned(on)}
        />
      ) : (
        open === null &&
        series.data.state !== "analysis failed" && (
          <EmptyState
            className="mt-5"
            figure={frame}
            title="Waiting for recordings"
            actions={
              <LinkButton tone="main" href={`/series/${seriesId}/runs`}>
                Go to runs
              </LinkButton>
            }
          >
            {runs.data?.captured ?? 0} of {runs.data?.planned ?? series.data.planned_runs.length}{" "}
            recordings are in. The analysis starts by itself when the last planned run has passed or
            been excused.
          </EmptyState>
        )
      )}
    </>
  );
}

const isOpen = (analysis: AnalysisView): boolean =>
  analysis.state === "queued" || analysis.state === "running";

function LoadFault({ error, onRetry }: { error: Error; onRetry: () => void }) {
  const problem = error instanceof ApiProblem ? error.problem : null;
  return (
    <FaultBar
      title="The output limit could not be loaded"
      actions={<Button onClick={onRetry}>Try again</Button>}
      {...(problem === null ? {} : { report: `report ${problem.requestId}` })}
    >
      {problem?.detail ??
        "The server did not answer. Nothing is lost: recordings and results are kept."}
    </FaultBar>
  );
}
