"use client";

import Link from "next/link";
import { useState } from "react";
import { toApiPath } from "@/lib/api/client";
import { getSeriesFolder } from "@/lib/api/keeping";
import type { SeriesView } from "@/lib/api/series";
import { Button, LinkButton } from "../parts/button";
import { useStartAnalysis } from "../queries/series";

interface RunsFootProps {
  series: SeriesView;
  captured: number;
  planned: number;
  mayAnalyse: boolean;
}

/** How many are in, what happens next, and the way to start it earlier. */
export function RunsFoot({ series, captured, planned, mayAnalyse }: RunsFootProps) {
  const start = useStartAnalysis(series.id);
  const [started, setStarted] = useState(false);
  const { latest_analysis: latest } = series;
  const going = latest !== null && (latest.state === "queued" || latest.state === "running");
  const all = captured >= planned;
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-3 pt-4">
      <p className="min-w-64 flex-1">
        <b>{all ? "All recordings are in." : `${captured} of ${planned} recordings are in.`}</b>{" "}
        <span className="text-ink-2">
          {going ? (
            <>
              Analysis {latest.version} is under way:{" "}
              <Link href={`/series/${series.id}/output-limit`}>follow it</Link>.
            </>
          ) : series.latest_done_analysis !== null && all ? (
            <>
              Analysis {series.latest_done_analysis.version} is done:{" "}
              <Link href={`/series/${series.id}/output-limit`}>see the output limit</Link>.
            </>
          ) : (
            "Analysis starts by itself when the last planned run has passed or been excused."
          )}{" "}
          Stop at 30 % THD or 6 dB compression in any band: do not go louder.
        </span>
        {start.isError && (
          <span role="alert" className="mt-1 block text-fault">
            {start.error.message}
          </span>
        )}
        {started && start.isSuccess && !going && (
          <output className="mt-1 block">
            Nothing has changed since analysis {start.data.version}: it stands.
          </output>
        )}
      </p>
      {series.latest_done_analysis !== null && (
        <LinkButton
          tone="quiet"
          href={toApiPath(getSeriesFolder, { seriesId: series.id })}
          download
        >
          Download as a folder, ZIP
        </LinkButton>
      )}
      {mayAnalyse && captured > 0 && !going && (
        <Button
          busy={start.isPending}
          onClick={() => {
            setStarted(true);
            start.mutate();
          }}
        >
          {series.latest_done_analysis === null ? "Start analysis now" : "Analyse again"}
        </Button>
      )}
    </div>
  );
}
