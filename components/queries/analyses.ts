/** Reads of analyses and their results, for the screens. */
import { queryOptions } from "@tanstack/react-query";
import { getAnalysis, getResult } from "@/lib/api/analyses";
import { callApi } from "@/lib/api/client";

const ENDED: ReadonlySet<string> = new Set(["done", "failed", "cancelled"]);

/** @param live whether the event stream tells of changes; without it a running analysis is asked for each second. */
export const analysisQuery = (analysisId: string, seriesId: string, live = false) =>
  queryOptions({
    queryKey: ["series", seriesId, "analysis", analysisId],
    queryFn: ({ signal }) => callApi(getAnalysis, { params: { analysisId } }, { signal }),
    refetchInterval: (query) =>
      query.state.data !== undefined && ENDED.has(query.state.data.state)
        ? false
        : live
          ? 5_000
          : 1_000,
  });

/** A result never changes: it is fetched once. */
export const resultQuery = (analysisId: string) =>
  queryOptions({
    queryKey: ["result", analysisId],
    queryFn: ({ signal }) => callApi(getResult, { params: { analysisId } }, { signal }),
    staleTime: Infinity,
    gcTime: 10 * 60_000,
  });
