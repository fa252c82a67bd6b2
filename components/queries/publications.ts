/** Reads and acts on what is published of a series, for the Summary tab. */
import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import type { z } from "zod";
import { callApi } from "@/lib/api/client";
import {
  answerMakerComment,
  createPreview,
  draftPublication,
  getSummaryKit,
  listPreviews,
  listPublications,
  publish,
  revokePreview,
  withdrawPublication,
} from "@/lib/api/publications";
import { queryKeys } from "./query-keys";

export const publicationsQuery = (seriesId: string) =>
  queryOptions({
    queryKey: queryKeys.publications(seriesId),
    queryFn: ({ signal }) => callApi(listPublications, { params: { seriesId } }, { signal }),
  });

/** The figures as they would be published now; fails where nobody signed. */
export const draftQuery = (seriesId: string) =>
  queryOptions({
    queryKey: queryKeys.draft(seriesId),
    queryFn: ({ signal }) =>
      callApi(draftPublication, { params: { seriesId }, body: {} }, { signal }),
    retry: false,
  });

export const summaryKitQuery = (seriesId: string, publicationId: string) =>
  queryOptions({
    queryKey: queryKeys.summaryKit(seriesId, publicationId),
    queryFn: ({ signal }) => callApi(getSummaryKit, { params: { publicationId } }, { signal }),
  });

export const previewsQuery = (seriesId: string) =>
  queryOptions({
    queryKey: queryKeys.previews(seriesId),
    queryFn: ({ signal }) => callApi(listPreviews, { params: { seriesId } }, { signal }),
  });

/** Everything of the series is stale after an act, done or refused. */
function useStale(seriesId: string): () => Promise<void> {
  const client = useQueryClient();
  return async () => {
    await client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    await client.invalidateQueries({ queryKey: queryKeys.seriesLists });
  };
}

export type PublishBody = z.input<NonNullable<typeof publish.body>>;
export type PreviewBody = z.input<NonNullable<typeof createPreview.body>>;

export function usePublish(seriesId: string) {
  return useMutation({
    mutationFn: (body: PublishBody) => callApi(publish, { params: { seriesId }, body }),
    onSettled: useStale(seriesId),
  });
}

export function useWithdraw(seriesId: string) {
  return useMutation({
    mutationFn: (input: { publicationId: string; reason: string }) =>
      callApi(withdrawPublication, {
        params: { publicationId: input.publicationId },
        body: { reason: input.reason },
      }),
    onSettled: useStale(seriesId),
  });
}

export function useCreatePreview(seriesId: string) {
  return useMutation({
    mutationFn: (body: PreviewBody) => callApi(createPreview, { params: { seriesId }, body }),
    onSettled: useStale(seriesId),
  });
}

export function useRevokePreview(seriesId: string) {
  return useMutation({
    mutationFn: (previewId: string) => callApi(revokePreview, { params: { previewId } }),
    onSettled: useStale(seriesId),
  });
}

export function useAnswerMaker(seriesId: string) {
  return useMutation({
    mutationFn: (input: { commentId: string; answer: string }) =>
      callApi(answerMakerComment, {
        params: { commentId: input.commentId },
        body: { answer: input.answer },
      }),
    onSettled: useStale(seriesId),
  });
}
