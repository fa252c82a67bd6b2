"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useState } from "react";
import { followSeries } from "@/lib/api/analyses";
import { toApiPath } from "@/lib/api/client";
import { queryKeys } from "./query-keys";

/** How often the page asks by itself while no stream tells it of changes. */
export const ASK_EVERY_MS = 3_000;
/** A browser gives a stream up for good where the server answers it with an error. */
export const NEW_STREAM_AFTER_MS = 10_000;

/**
 * Listens to the changes of a series and makes its answers stale when one comes. While the stream
 * does not stand, they become stale at intervals instead.
 *
 * @returns whether the stream stands.
 */
export function useSeriesEvents(seriesId: string): boolean {
  const client = useQueryClient();
  const [live, setLive] = useState(false);
  useEffect(() => {
    let source: EventSource;
    let again: ReturnType<typeof setTimeout> | undefined;
    const open = (): void => {
      const stream = new EventSource(toApiPath(followSeries, { seriesId }));
      stream.addEventListener("open", () => setLive(true));
      stream.addEventListener("error", () => {
        setLive(false);
        // After a lost connection the browser tries again by itself.
        if (stream.readyState === EventSource.CLOSED) again = setTimeout(open, NEW_STREAM_AFTER_MS);
      });
      stream.addEventListener("change", () => {
        void client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
      });
      source = stream;
    };
    open();
    return () => {
      clearTimeout(again);
      source.close();
    };
  }, [client, seriesId]);
  useEffect(() => {
    if (live) return undefined;
    const asking = setInterval(() => {
      void client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    }, ASK_EVERY_MS);
    return () => clearInterval(asking);
  }, [client, seriesId, live]);
  return live;
}
