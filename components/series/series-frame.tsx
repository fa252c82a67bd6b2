"use client";

import { useQuery } from "@tanstack/react-query";
import { usePathname } from "next/navigation";
import type { ReactNode } from "react";
import { ApiProblem } from "@/lib/api/client";
import type { SeriesView } from "@/lib/api/series";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { toMaxLevelNotice, toTesterNotice, type HearingNotice } from "@/lib/exposure/notices";
import { computeSessionDose } from "@/lib/exposure/session-dose";
import { useLabSession } from "../frame/lab-session";
import { PageHead } from "../frame/page-head";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { SlimNotice } from "../parts/notice";
import { StateBoxes } from "../parts/state-boxes";
import { EmptyState, LoadingState } from "../parts/states";
import { Tabs } from "../parts/tabs";
import { ENVIRONMENT_WORDS, toPlanLine } from "../plan/plan-words";
import { seriesQuery } from "../queries/series";

interface SeriesFrameProps {
  seriesId: string;
  children: ReactNode;
}

const TABS = [
  ["plan", "Plan"],
  ["runs", "Runs"],
  ["output-limit", "Output limit"],
  ["distortion", "Distortion"],
  ["summary", "Summary"],
  ["history", "History"],
] as const;

/** The head of every view of a series: name, five boxes, notice, tabs. */
export function SeriesFrame({ seriesId, children }: SeriesFrameProps) {
  const series = useQuery(seriesQuery(seriesId));
  const view = usePathname().split("/").at(-1) ?? "";
  if (series.data === undefined) {
    if (series.isError) {
      return <SeriesFault error={series.error} onRetry={() => void series.refetch()} />;
    }
    return (
      <div className="px-gutter pt-5 max-md:px-phone">
        <LoadingState label="Loading the series" onRetry={() => void series.refetch()} />
      </div>
    );
  }
  return (
    <>
      <SeriesHead series={series.data} view={view} />
      {children}
    </>
  );
}

function SeriesHead({ series, view }: { series: SeriesView; view: string }) {
  const { loudspeaker, plan } = series;
  return (
    <>
      <PageHead
        crumb={{ href: "/series", label: "Series", here: series.number }}
        title={loudspeaker.model}
        line={toHeadLine(series)}
        wideAside
        aside={<StateBoxes steps={series.steps} />}
      />
      <FrameNotice series={series} view={view} />
      <div className="flex flex-wrap items-center gap-x-3.5 gap-y-2 px-gutter pt-3.5 pb-3 max-md:px-phone">
        <Tabs
          className="mr-auto max-w-full"
          label="Views of this series"
          tabs={TABS.map(([path, label]) => ({ href: `/series/${series.id}/${path}`, label }))}
        />
        {view === "runs" && (
          <p className="figures text-[13px]/[18px] text-ink-2 max-md:w-full">
            <span className="text-label">plan </span>
            {toPlanLine(plan)}
          </p>
        )}
      </div>
      {series.archived_at !== null && (
        <p className="mx-gutter mb-3 border-l-4 border-edge py-1 pl-4 text-ink-2 max-md:mx-phone">
          In the archive: {loudspeaker.model} of {loudspeaker.maker} can be read, not changed.
        </p>
      )}
    </>
  );
}

function toHeadLine({ loudspeaker, plan }: SeriesView): string {
  return [
    loudspeaker.maker,
    loudspeaker.kind,
    ...(loudspeaker.serial === "" ? [] : [`unit ${loudspeaker.serial}`]),
    `${ENVIRONMENT_WORDS[plan.place.environment]}, ${formatPlain(plan.place.distance_m)}${NBSP}m`,
  ].join(" · ");
}

/** One notice a view: the tester's where recordings are made, the level's where levels are shown. */
function FrameNotice({ series, view }: { series: SeriesView; view: string }) {
  const { lab } = useLabSession();
  const notice = toFrameNotice(series, view, lab?.settings.exposure_rule ?? "niosh");
  if (notice === null) return null;
  return (
    <div className="px-gutter max-md:px-phone">
      <SlimNotice notice={notice} />
    </div>
  );
}

function toFrameNotice(
  series: SeriesView,
  view: string,
  rule: "niosh" | "eu",
): HearingNotice | null {
  const stage = series.loudspeaker.kind.includes("stage");
  if (view === "runs") {
    return toTesterNotice(computeSessionDose(series.plan, rule), { where: "runs", stage });
  }
  if ((view === "output-limit" || view === "distortion") && series.max_level_dB !== null) {
    const notice = toMaxLevelNotice({
      levelDb: series.max_level_dB,
      distanceM: 1,
      stage,
      mayPlayLouder: true,
    });
    return { ...notice, text: `${notice.text} ${notice.method}` };
  }
  return null;
}

function SeriesFault({ error, onRetry }: { error: Error; onRetry: () => void }) {
  const missing = error instanceof ApiProblem && error.code === "not-found";
  return (
    <div className="px-gutter py-6 max-md:px-phone">
      {missing ? (
        <EmptyState
          title="There is no such series in this lab"
          actions={<LinkButton href="/series">To the list</LinkButton>}
        >
          It may have been deleted, or it belongs to another of your labs.
        </EmptyState>
      ) : (
        <FaultBar
          title="The series could not be read"
          actions={<Button onClick={onRetry}>Try again</Button>}
          report={
            error instanceof ApiProblem && error.problem.requestId !== ""
              ? `report ${error.problem.requestId}`
              : undefined
          }
        >
          {error.message}
        </FaultBar>
      )}
    </div>
  );
}
