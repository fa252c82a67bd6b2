"use client";

import { useQuery } from "@tanstack/react-query";
import { parseAsFloat, parseAsString, useQueryStates } from "nuqs";
import { useState } from "react";
import { ApiProblem } from "@/lib/api/client";
import type { AnalysisView } from "@/lib/api/analyses";
import { listCriterionParts, readCriterion, sayCriterion } from "@/lib/result/criteria";
import type { Result } from "@/lib/result/result-schema";
import type { Criterion } from "@/lib/series/series-schema";
import { analysisQuery, resultQuery } from "../queries/analyses";
import { findLoadFailure } from "../queries/load-failure";
import { runsQuery } from "../queries/runs";
import { seriesQuery } from "../queries/series";
import { useSeriesEvents } from "../queries/use-series-events";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { AnalysisProgress } from "./analysis-progress";
import { AnalysisFailed } from "./analysis-failed";
import { BandDetail } from "./band-detail";
import { CriterionSwitch } from "./criterion-switch";
import { EmptyWall } from "./empty-wall";
import { HeadlineLine } from "./headline-line";
import { InputOutput } from "./input-output";
import { OutputLimitFigure } from "./output-limit-figure";
import { ResultNotes } from "./result-notes";
import { RunStrip } from "./run-strip";

interface OutputLimitViewProps {
  seriesId: string;
  /** The caller may start an analysis and replace recordings. */
  mayAnalyse: boolean;
}

/** The workspace of a series: what it reached in every band, what gave out and why. */
export function OutputLimitView({ seriesId, mayAnalyse }: OutputLimitViewProps) {
  const live = useSeriesEvents(seriesId);
  const series = useQuery(seriesQuery(seriesId));
  const runs = useQuery(runsQuery(seriesId, live));
  const latest = series.data?.latest_analysis ?? null;
  const done = series.data?.latest_done_analysis ?? null;
  const analysis = useQuery({
    ...analysisQuery(latest?.id ?? "", seriesId, live),
    enabled: latest !== null,
  });
  const result = useQuery({ ...resultQuery(done?.id ?? ""), enabled: done !== null });

  const failure = findLoadFailure([series, runs, result]);
  if (failure !== null) return <LoadFault error={failure.error} onRetry={failure.retry} />;
  if (series.data === undefined || (done !== null && result.data === undefined)) {
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
      {result.data !== undefined && done !== null ? (
        <Workspace
          result={result.data}
          version={done.version}
          watched={latest?.id === done.id && open === null}
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

interface WorkspaceProps {
  result: Result;
  version: number;
  /** The newest analysis is done and nothing is under way. */
  watched: boolean;
}

function Workspace({ result, version, watched }: WorkspaceProps) {
  const parts = listCriterionParts(result.settings.criteria);
  const [address, setAddress] = useQueryStates(
    { thd: parseAsString, compression: parseAsString, band: parseAsFloat },
    { history: "replace" },
  );
  // Columns rise once for an analysis that was finished while the page stood open.
  const [firstVersion] = useState(version);
  const criterion = readCriterion(parts, address);
  const band =
    result.bands.find((one) => one.nominal_Hz === address.band) ?? pickFirstBand(result, criterion);
  const onCriterion = (next: Criterion): void => {
    void setAddress({
      thd: next.thd_percent === undefined ? "off" : String(next.thd_percent),
      compression: next.compression_dB === undefined ? "off" : String(next.compression_dB),
    });
  };
  const onSelect = (nominalHz: number): void => void setAddress({ band: nominalHz });
  return (
    <div className="mt-4">
      <div className="flex flex-wrap items-end justify-between gap-x-8 gap-y-3">
        <HeadlineLine result={result} criterion={criterion} />
        <CriterionSwitch parts={parts} criterion={criterion} onChange={onCriterion} />
      </div>
      <div className="mt-3 grid gap-x-6 gap-y-6 xl:grid-cols-[minmax(0,1fr)_364px]">
        <div className="min-w-0">
          <OutputLimitFigure
            result={result}
            criterion={criterion}
            selectedHz={band?.nominal_Hz ?? null}
            onSelect={onSelect}
            rise={watched && version !== firstVersion}
          />
          <ResultNotes result={result} />
          <p className="figures mt-4 text-label text-ink-2">
            analysis version {version}, engine {result.engine.version}, {sayCriterion(criterion)}
          </p>
        </div>
        {band !== undefined && (
          <aside className="min-w-0 xl:border-l xl:border-rule xl:pl-5">
            <BandDetail
              result={result}
              band={band}
              criterion={criterion}
              onMove={onSelect}
              figure={<InputOutput result={result} band={band} />}
            />
          </aside>
        )}
      </div>
    </div>
  );
}

/** The band that gives out first, else the lowest one: where a person wants to look. */
function pickFirstBand(result: Result, criterion: Criterion) {
  const headline = result.headline.find(
    (one) =>
      one.criterion.thd_percent === criterion.thd_percent &&
      one.criterion.compression_dB === criterion.compression_dB,
  );
  const hz = headline?.first?.nominal_Hz;
  return result.bands.find((one) => one.nominal_Hz === hz) ?? result.bands[0];
}
