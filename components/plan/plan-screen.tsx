"use client";

import { useQuery } from "@tanstack/react-query";
import type { DayRuleName } from "@/lib/exposure/rules";
import { useLabSession } from "../frame/lab-session";
import { LoadingState } from "../parts/states";
import { loudspeakerQuery } from "../queries/loudspeakers";
import { seriesQuery } from "../queries/series";
import { PlanForm } from "./plan-form";
import { PlanView } from "./plan-view";

interface PlanScreenProps {
  seriesId: string;
  mayCapture: boolean;
}

/** The lab's rule for a working day. */
const useDayRule = (): DayRuleName => useLabSession().lab?.settings.exposure_rule ?? "niosh";

/** The plan of a series: a form until the first recording is in. */
export function PlanScreen({ seriesId, mayCapture }: PlanScreenProps) {
  const rule = useDayRule();
  const { data: series } = useQuery(seriesQuery(seriesId));
  // The frame of the series says what is wrong where it cannot be read.
  if (series === undefined) return null;
  if (!mayCapture) {
    return <PlanView series={series} rule={rule} why="A tester or an analyst edits the plan." />;
  }
  if (series.archived_at !== null) {
    return <PlanView series={series} rule={rule} why="The series is in the archive." />;
  }
  if (series.plan_locked) {
    return (
      <PlanView
        series={series}
        rule={rule}
        why="The plan is fixed: a recording is in. A new series takes another plan."
      />
    );
  }
  return <PlanForm key={series.id} series={series} rule={rule} />;
}

/** @param loudspeakerId picked beforehand, from the loudspeaker's own page. */
export function NewSeries({ loudspeakerId }: { loudspeakerId: string | null }) {
  const rule = useDayRule();
  const picked = useQuery({
    ...loudspeakerQuery(loudspeakerId ?? ""),
    enabled: loudspeakerId !== null,
  });
  if (loudspeakerId !== null && picked.isPending) {
    return (
      <div className="px-gutter max-md:px-phone">
        <LoadingState label="Loading the loudspeaker" onRetry={() => void picked.refetch()} />
      </div>
    );
  }
  return <PlanForm series={null} loudspeaker={picked.data ?? null} rule={rule} />;
}
