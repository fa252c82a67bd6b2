/** Reads and acts on the recordings of a series, for the screens. */
import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/lib/api/client";
import { actOnRun, excuseSlot, listRuns, removeRun, type RunAct } from "@/lib/api/runs";
import { queryKeys } from "./query-keys";

/** @param live whether the event stream tells of changes; without it the page asks every 3 s. */
export const runsQuery = (seriesId: string, live = false) =>
  queryOptions({
    queryKey: queryKeys.runs(seriesId),
    queryFn: ({ signal }) => callApi(listRuns, { params: { seriesId } }, { signal }),
    refetchInterval: live ? 30_000 : 3_000,
  });

/** Every act on recordings moves the ladder, the boxes in the header and the history. */
function useSeriesRefresh(seriesId: string): () => Promise<void> {
  const client = useQueryClient();
  return async () => {
    await client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    void client.invalidateQueries({ queryKey: queryKeys.seriesLists });
  };
}

export function useActOnRun(seriesId: string) {
  const refresh = useSeriesRefresh(seriesId);
  return useMutation({
    mutationFn: (input: { runId: string; act: RunAct }) =>
      callApi(actOnRun, { params: { runId: input.runId }, body: input.act }),
    onSettled: refresh,
  });
}

export function useRemoveRun(seriesId: string) {
  const refresh = useSeriesRefresh(seriesId);
  return useMutation({
    mutationFn: (runId: string) => callApi(removeRun, { params: { runId } }),
    onSettled: refresh,
  });
}

/** @param remove has the server forget the upload of this id. */
export function useRemoveUpload(seriesId: string, remove: (id: string) => Promise<void>) {
  const refresh = useSeriesRefresh(seriesId);
  return useMutation({ mutationFn: remove, onSettled: refresh });
}

/** A planned run is excused with a reason; null withdraws that. */
export function useExcuseSlot(seriesId: string) {
  const refresh = useSeriesRefresh(seriesId);
  return useMutation({
    mutationFn: (input: { slot: string; reason: string | null }) =>
      callApi(excuseSlot, {
        params: { seriesId, slot: input.slot },
        body: { reason: input.reason },
      }),
    onSettled: refresh,
  });
}
