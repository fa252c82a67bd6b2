"use client";

import { useQuery } from "@tanstack/react-query";
import {
  parseAsArrayOf,
  parseAsFloat,
  parseAsInteger,
  parseAsString,
  parseAsStringLiteral,
  useQueryStates,
} from "nuqs";
import { ApiProblem } from "@/lib/api/client";
import { SHOWN_FIRST } from "@/lib/charts/distortion-parts";
import { sayRun } from "@/lib/charts/distortion-words";
import { formatPlain } from "@/lib/charts/format";
import { listPlainLevels } from "@/lib/charts/series-levels";
import { listCriterionParts, readCriterion } from "@/lib/result/criteria";
import type { Result, ResultRun } from "@/lib/result/result-schema";
import { resultQuery } from "../queries/analyses";
import { findLoadFailure } from "../queries/load-failure";
import { seriesQuery } from "../queries/series";
import { useSeriesEvents } from "../queries/use-series-events";
import { Button, LinkButton } from "../parts/button";
import { CrosshairProvider } from "../parts/crosshair";
import { FaultBar } from "../parts/fault-bar";
import { LevelSwatch } from "../parts/level-swatch";
import { SegmentedControl } from "../parts/segmented-control";
import { EmptyState, LoadingState } from "../parts/states";
import { DistortionFigure } from "./distortion-figure";
import { RunMultiples } from "./run-multiples";

/** Distortion of a series: the chosen run large, all runs beside it on the same axes. */
export function DistortionView({ seriesId }: { seriesId: string }) {
  useSeriesEvents(seriesId);
  const series = useQuery(seriesQuery(seriesId));
  const done = series.data?.latest_done_analysis ?? null;
  const result = useQuery({ ...resultQuery(done?.id ?? ""), enabled: done !== null });
  const failure = findLoadFailure([series, result]);
  if (failure !== null) {
    const problem = failure.error instanceof ApiProblem ? failure.error.problem : null;
    return (
      <FaultBar
        title="The distortion could not be loaded"
        actions={<Button onClick={failure.retry}>Try again</Button>}
        {...(problem === null ? {} : { report: `report ${problem.requestId}` })}
      >
        {problem?.detail ??
          "The server did not answer. Nothing is lost: recordings and results are kept."}
      </FaultBar>
    );
  }
  if (series.data !== undefined && done === null) {
    return (
      <EmptyState
        title="No analysis yet"
        actions={<LinkButton href={`/series/${seriesId}/runs`}>Go to runs</LinkButton>}
      >
        Distortion is shown run by run once the recordings have been analysed.
      </EmptyState>
    );
  }
  return result.data === undefined ? (
    <LoadingState label="Loading the distortion" />
  ) : (
    <DistortionScreen result={result.data} />
  );
}

const isShown = (run: ResultRun): boolean => run.variant === undefined && run.kind !== "closing";

const ADDRESS = {
  run: parseAsString,
  unit: parseAsStringLiteral(["percent", "dB"] as const).withDefault("percent"),
  lines: parseAsArrayOf(parseAsInteger).withDefault([...SHOWN_FIRST]),
  band: parseAsFloat,
  thd: parseAsString,
};

/** The screen over one result; what is chosen stands in the address. */
export function DistortionScreen({ result }: { result: Result }) {
  const [address, setAddress] = useQueryStates(ADDRESS, { history: "replace" });
  const runs = result.runs.filter(isShown);
  const run =
    runs.find((one) => one.file === address.run) ??
    runs.findLast((one) => one.kind === "short-term") ??
    runs[0];
  if (run === undefined) {
    return (
      <EmptyState title="No run to show">
        This analysis holds no run of its own kind: only repeats and variants.
      </EmptyState>
    );
  }
  const levels = listPlainLevels(result.runs);
  const criterion = readCriterion(listCriterionParts(result.settings.criteria), {
    thd: address.thd,
    compression: null,
  });
  const percent = criterion.thd_percent ?? null;
  const selectedHz =
    result.bands.find((band) => band.nominal_Hz === address.band)?.nominal_Hz ?? null;
  const pick = (file: string): void => void setAddress({ run: file });
  return (
    <CrosshairProvider>
      <div className="flex flex-wrap items-center justify-end gap-x-5 gap-y-3 py-3">
        <SegmentedControl
          legend="run"
          value={run.file}
          onChange={pick}
          segments={runs.map((one) => {
            const paint = levels.find((level) => level.levelDb >= one.level_dB)?.paint;
            return {
              value: one.file,
              label: (
                <>
                  {paint !== undefined && (
                    <LevelSwatch paint={paint} longTerm={one.kind === "long-term"} />
                  )}
                  <span aria-hidden="true">
                    {formatPlain(one.level_dB)}
                    {one.kind === "long-term" ? " long" : ""}
                  </span>
                  <span className="sr-only">{sayRun(one)}</span>
                </>
              ),
            };
          })}
        />
        <SegmentedControl
          legend="scale"
          value={address.unit}
          onChange={(unit) => void setAddress({ unit })}
          segments={[
            { value: "percent", label: "%" },
            { value: "dB", label: "dB" },
          ]}
        />
      </div>
      <div className="grid grid-cols-[minmax(0,1fr)] gap-x-7 gap-y-6 xl:grid-cols-[minmax(0,1fr)_404px]">
        <div className="min-w-0">
          <DistortionFigure
            result={result}
            run={run}
            shown={address.lines}
            onShown={(lines) => void setAddress({ lines })}
            unit={address.unit}
            criterionPercent={percent}
            selectedHz={selectedHz}
            onSelect={(band) => void setAddress({ band })}
          />
        </div>
        <RunMultiples
          result={result}
          runs={runs}
          run={run}
          onPick={pick}
          criterionPercent={percent}
          selectedHz={selectedHz}
        />
      </div>
    </CrosshairProvider>
  );
}
