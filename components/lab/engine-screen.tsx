"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import type { z } from "zod";
import type { listEngineChanges } from "@/lib/api/review";
import { formatFrequency } from "@/lib/charts/format";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { useMay } from "../frame/lab-session";
import { engineChangesQuery } from "../queries/review";
import { useStartAnalysis } from "../queries/series";
import { LabHead } from "./lab-head";

type Published = z.output<NonNullable<typeof listEngineChanges.answer>>["series"][number];

/** After an engine update: which published values would change, and by how much. */
export function EngineScreen() {
  const changes = useQuery(engineChangesQuery());
  return (
    <>
      <LabHead
        title="Engine"
        line={changes.data === undefined ? undefined : `engine ${changes.data.engine_version}`}
      />
      <div className="px-gutter pb-10 max-md:px-phone">
        {changes.isPending && (
          <LoadingState label="Loading" onRetry={() => void changes.refetch()} />
        )}
        {changes.isError && (
          <FaultBar
            title="The list could not be read"
            actions={<Button onClick={() => void changes.refetch()}>Try again</Button>}
          >
            {changes.error.message}
          </FaultBar>
        )}
        {changes.data?.series.length === 0 && (
          <EmptyState title="Nothing published would change">
            Every published test was computed by this engine. After an update, tests of an older
            engine are listed here with the values that would change; what is published stays as it
            is.
          </EmptyState>
        )}
        <ul>
          {changes.data?.series.map((one) => (
            <PublishedSeries key={one.series_id} series={one} />
          ))}
        </ul>
      </div>
    </>
  );
}

/** The way to see what would change; the sign-off stays with its version. */
function NotAnalysed({ seriesId, name }: { seriesId: string; name: string }) {
  const start = useStartAnalysis(seriesId);
  const mayAnalyse = useMay("analyse");
  if (start.isSuccess) {
    return (
      <output className="mt-1 block">
        Its analysis is under way: <Link href={`/series/${seriesId}/output-limit`}>follow it</Link>.
      </output>
    );
  }
  return (
    <div className="mt-1 flex flex-wrap items-center gap-x-4 gap-y-2">
      <p>Not analysed by this engine yet: what would change is not known.</p>
      {mayAnalyse && (
        <Button
          size="small"
          busy={start.isPending}
          aria-label={`Analyse ${name} by this engine`}
          onClick={() => start.mutate()}
        >
          Analyse
        </Button>
      )}
      {start.isError && (
        <p role="alert" className="w-full text-small text-fault">
          {start.error.message}
        </p>
      )}
    </div>
  );
}

function PublishedSeries({ series }: { series: Published }) {
  const { series_id, number, name, published_engine, changes } = series;
  return (
    <li className="border-t border-rule py-3">
      <h2 className="text-section">
        <Link href={`/series/${series_id}/output-limit`}>{name}</Link>
      </h2>
      <p className="figures text-label text-ink-2">
        {number}, published from engine {published_engine}
      </p>
      {changes === null ? (
        <NotAnalysed seriesId={series_id} name={name} />
      ) : changes.length === 0 ? (
        <p className="mt-1">No published limit would change.</p>
      ) : (
        <ul className="figures mt-1 grid gap-0.5 text-figure">
          {changes.map((change) => (
            <li key={change.nominal_Hz} className="flex gap-4">
              <span className="w-20 flex-none text-right">
                {formatFrequency(change.nominal_Hz)}
              </span>
              {change.words}
            </li>
          ))}
        </ul>
      )}
    </li>
  );
}
