"use client";

import type { Failure } from "@/lib/api/series";
import { toMoment } from "@/lib/time/time-words";
import { useLabZone } from "../frame/lab-session";
import { useNow } from "../frame/use-now";
import { useStartAnalysis } from "../queries/series";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";

interface AnalysisFailedProps {
  seriesId: string;
  failure: Failure;
  mayAct: boolean;
}

/** Cause in plain words, what is safe, then the likeliest remedy first. */
export function AnalysisFailed({ seriesId, failure, mayAct }: AnalysisFailedProps) {
  const start = useStartAnalysis(seriesId);
  const at = toMoment(failure.at, useNow(), useLabZone());
  return (
    <FaultBar
      className="mt-5"
      title={
        failure.file === null ? "The analysis stopped" : `The analysis stopped at ${failure.file}`
      }
      report={`${at} · report ${failure.report}`}
      actions={
        mayAct && (
          <>
            <LinkButton tone="main" href={`/series/${seriesId}/runs`}>
              {failure.slot === null ? "Go to runs" : "Replace the file"}
            </LinkButton>
            <Button busy={start.isPending} onClick={() => start.mutate()}>
              Try again
            </Button>
          </>
        )
      }
    >
      {failure.message} {failure.remedy} The recordings are kept as they are.
      {start.isError && <span className="mt-2 block text-fault">{start.error.message}</span>}
    </FaultBar>
  );
}
