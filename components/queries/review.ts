/** Reads and acts of a review, for the screens. Decisions themselves go through the outbox. */
import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { listAnalyses } from "@/lib/api/analyses";
import { callApi } from "@/lib/api/client";
import {
  compareAnalyses,
  getReview,
  keepDecisions,
  listEngineChanges,
  reopenSeries,
  requestRun,
  signOff,
  withdrawRunRequest,
  writeComment,
} from "@/lib/api/review";
import type { Criterion } from "@/lib/series/series-schema";
import { queryKeys } from "./query-keys";
import { takeSeries } from "./series";

/** @param live whether the event stream tells of changes. */
export const reviewQuery = (analysisId: string, seriesId: string, live = false) =>
  queryOptions({
    queryKey: queryKeys.review(seriesId, analysisId),
    queryFn: ({ signal }) => callApi(getReview, { params: { analysisId } }, { signal }),
    refetchInterval: live ? 60_000 : 10_000,
  });

/** Versions of a series, newest first. */
export const analysesQuery = (seriesId: string) =>
  queryOptions({
    queryKey: queryKeys.analyses(seriesId),
    queryFn: ({ signal }) => callApi(listAnalyses, { params: { seriesId } }, { signal }),
  });

/** What both analyses found never changes; the decisions of the older one may. */
export const changesQuery = (analysisId: string, againstId: string) =>
  queryOptions({
    queryKey: queryKeys.changes(analysisId, againstId),
    queryFn: ({ signal }) =>
      callApi(
        compareAnalyses,
        { params: { analysisId }, query: { against: againstId } },
        { signal },
      ),
  });

export const engineChangesQuery = () =>
  queryOptions({
    queryKey: queryKeys.engineChanges,
    queryFn: ({ signal }) => callApi(listEngineChanges, {}, { signal }),
  });

/** Whatever was done, everything of the series is read again. */
function useRefresh(seriesId: string): () => Promise<void> {
  const client = useQueryClient();
  return async () => {
    await client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    void client.invalidateQueries({ queryKey: queryKeys.seriesLists });
  };
}

interface ReviewPlace {
  seriesId: string;
  analysisId: string;
}

export function useWriteComment({ seriesId, analysisId }: ReviewPlace) {
  const onSettled = useRefresh(seriesId);
  return useMutation({
    mutationFn: (comment: { nominal_Hz: number | null; words: string }) =>
      callApi(writeComment, { params: { analysisId }, body: comment }),
    onSettled,
  });
}

export function useRequestRun(seriesId: string) {
  const onSettled = useRefresh(seriesId);
  return useMutation({
    mutationFn: (body: {
      level_dB: number;
      kind: "short-term" | "long-term";
      variant: string | null;
      reason: string;
    }) => callApi(requestRun, { params: { seriesId }, body }),
    onSettled,
  });
}

export function useWithdrawRequest(seriesId: string) {
  const onSettled = useRefresh(seriesId);
  return useMutation({
    mutationFn: (requestId: string) => callApi(withdrawRunRequest, { params: { requestId } }),
    onSettled,
  });
}

export function useSignOff({ seriesId, analysisId }: ReviewPlace) {
  const onSettled = useRefresh(seriesId);
  return useMutation({
    mutationFn: (body: { criterion: Criterion; decisions_digest: string }) =>
      callApi(signOff, { params: { analysisId }, body }),
    onSettled,
  });
}

export function useReopen(seriesId: string) {
  const client = useQueryClient();
  const onSettled = useRefresh(seriesId);
  return useMutation({
    mutationFn: (reason: string) =>
      callApi(reopenSeries, { params: { seriesId }, body: { reason } }),
    onSuccess: (series) => takeSeries(client, series),
    onSettled,
  });
}

export function useKeepDecisions({ seriesId, analysisId }: ReviewPlace) {
  const onSettled = useRefresh(seriesId);
  return useMutation({
    mutationFn: (fromId: string) =>
      callApi(keepDecisions, { params: { analysisId }, body: { from: fromId } }),
    onSettled,
  });
}
