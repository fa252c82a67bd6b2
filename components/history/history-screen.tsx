"use client";

import { useQuery } from "@tanstack/react-query";
import { useLabZone } from "../frame/lab-session";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { seriesHistoryQuery, seriesQuery } from "../queries/series";
import { useSeriesEvents } from "../queries/use-series-events";
import { ArchiveSeries } from "./archive-series";
import { toHistoryDays, toWhoWords } from "./history-words";

/** Who did what, when and why: newest first. */
export function HistoryScreen({ seriesId, mayCapture }: { seriesId: string; mayCapture: boolean }) {
  useSeriesEvents(seriesId);
  const timeZone = useLabZone();
  const series = useQuery(seriesQuery(seriesId));
  const history = useQuery(seriesHistoryQuery(seriesId));
  return (
    <div className="px-gutter pb-8 max-md:px-phone">
      {history.isPending && (
        <LoadingState label="Loading the history" onRetry={() => void history.refetch()} />
      )}
      {history.isError && (
        <FaultBar
          title="The history could not be read"
          actions={<Button onClick={() => void history.refetch()}>Try again</Button>}
        >
          {history.error.message}
        </FaultBar>
      )}
      {history.data?.events.length === 0 && (
        <EmptyState title="Nothing has happened yet">
          Every step of the series will stand here, with its reason.
        </EmptyState>
      )}
      {toHistoryDays(history.data?.events ?? [], timeZone).map(({ day, events }) => (
        <section key={day} className="border-t border-rule py-4 first:border-t-0">
          <h2 className="text-[17px]/6">{day}</h2>
          <ol className="mt-2">
            {events.map(({ event, time }) => (
              <li
                key={event.id}
                className="grid grid-cols-[56px_minmax(0,1fr)] gap-x-4 py-1.5 sm:grid-cols-[56px_180px_minmax(0,1fr)]"
              >
                <time dateTime={event.at} className="figures text-[13px]/[22px] text-ink-2">
                  {time}
                </time>
                <span className="max-sm:col-start-2">{toWhoWords(event)}</span>
                <span className="min-w-0 break-words max-sm:col-start-2">
                  {event.words}
                  {event.reason !== null && (
                    <span className="block text-ink-2">“{event.reason}”</span>
                  )}
                </span>
              </li>
            ))}
          </ol>
        </section>
      ))}
      {mayCapture && series.data !== undefined && <ArchiveSeries series={series.data} />}
    </div>
  );
}
