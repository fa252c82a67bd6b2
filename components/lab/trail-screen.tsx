"use client";

import { useInfiniteQuery } from "@tanstack/react-query";
import Link from "next/link";
import { parseAsStringLiteral, useQueryState } from "nuqs";
import type { TrailEvent } from "@/lib/api/labs";
import { TRAIL_ABOUT } from "@/lib/labs/trail-about";
import { useLabZone } from "../frame/lab-session";
import { toHistoryDays, toWhoWords } from "../history/history-words";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { SegmentedControl } from "../parts/segmented-control";
import { EmptyState, LoadingState } from "../parts/states";
import { trailQuery } from "../queries/people";
import { LabHead } from "./lab-head";
import { ABOUT_WORDS, toTrailWords } from "./trail-words";

/** Who did what in the lab, newest first. Nothing in it can be changed. */
export function TrailScreen() {
  const zone = useLabZone();
  const [about, setAbout] = useQueryState("about", parseAsStringLiteral(TRAIL_ABOUT));
  const trail = useInfiniteQuery(trailQuery(about));
  const events = trail.data?.pages.flatMap((page) => page.events) ?? [];
  return (
    <>
      <LabHead title="Trail" line={`newest first, times in ${zone}`} />
      <div className="px-gutter pb-10 max-md:px-phone">
        <SegmentedControl<(typeof TRAIL_ABOUT)[number] | "all">
          legend="about"
          hideLegend
          className="max-w-full"
          value={about ?? "all"}
          onChange={(value) => void setAbout(value === "all" ? null : value)}
          segments={[
            { value: "all", label: "everything" },
            ...TRAIL_ABOUT.map((value) => ({ value, label: ABOUT_WORDS[value] })),
          ]}
        />
        {trail.isPending && (
          <div className="mt-4">
            <LoadingState label="Loading the trail" onRetry={() => void trail.refetch()} />
          </div>
        )}
        {trail.isError && (
          <FaultBar
            className="mt-4"
            title="The trail could not be read"
            actions={<Button onClick={() => void trail.refetch()}>Try again</Button>}
          >
            {trail.error.message}
          </FaultBar>
        )}
        {trail.data !== undefined && events.length === 0 && (
          <EmptyState
            className="mt-4"
            title="Nothing of this kind has happened"
            actions={<Button onClick={() => void setAbout(null)}>Show everything</Button>}
          >
            Sign-ins, changes of roles, tokens and settings stand here, and every act on a series.
          </EmptyState>
        )}
        {toHistoryDays(events, zone).map(({ day, events: those }) => (
          <section key={day} className="border-b border-rule py-4 last:border-b-0">
            <h2 className="text-[17px]/6">{day}</h2>
            <ol className="mt-2">
              {those.map(({ event, time }) => (
                <TrailLine key={event.id} event={event} time={time} />
              ))}
            </ol>
          </section>
        ))}
        {trail.hasNextPage && (
          <div className="border-t border-rule pt-4">
            <Button busy={trail.isFetchingNextPage} onClick={() => void trail.fetchNextPage()}>
              Older events
            </Button>
          </div>
        )}
      </div>
    </>
  );
}

function TrailLine({ event, time }: { event: TrailEvent; time: string }) {
  const { words, reason } = toTrailWords(event);
  return (
    <li className="grid grid-cols-[56px_minmax(0,1fr)] gap-x-4 py-1.5 sm:grid-cols-[56px_200px_minmax(0,1fr)]">
      <time dateTime={event.at} className="figures text-[13px]/[22px] text-ink-2">
        {time}
      </time>
      <span className="max-sm:col-start-2 max-sm:font-semibold">{toWhoWords(event)}</span>
      <span className="min-w-0 break-words max-sm:col-start-2">
        {words}
        {event.series_id !== null && (
          <>
            {" "}
            <Link href={`/series/${event.series_id}/history`} className="text-small text-ink-2">
              its series
            </Link>
          </>
        )}
        {reason !== null && <span className="block text-ink-2">“{reason}”</span>}
      </span>
    </li>
  );
}
