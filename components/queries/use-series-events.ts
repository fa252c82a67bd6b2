"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useState } from "react";
import { followSeries } from "@/lib/api/analyses";
import { toApiPath } from "@/lib/api/client";
import { queryKeys } from "./query-keys";

/**
 * Listens to the changes of a series and makes its answers stale when one comes.
 *
 * @returns whether the stream stands; while it does not, the page asks at intervals instead.
 */
export function useSeriesEvents(seriesId: string): boolean {
  const client = useQueryClient();
  const [live, setLive] = useState(false);
  useEffect(() => {
    const source = new EventSource(toApiPath(followSeries, { seriesId }));
    const refresh = (): void => {
      void client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    };
    source.addEventListener("open", () => setLive(true));
    // The browser tries again by itself; until then the page asks at intervals.
    source.addEventListener("error", () => setLive(false));
    source.addEventListener("change", refresh);
    source.addEventListener("analysis", refresh);
    return () => source.close();
  }, [client, seriesId]);
  return live;
}
