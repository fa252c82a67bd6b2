/** Reads and acts on what the lab keeps. */
import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/lib/api/client";
import { getKeeping, removeRecordings } from "@/lib/api/keeping";
import { queryKeys } from "./query-keys";

export const keepingQuery = queryOptions({
  queryKey: queryKeys.keeping,
  queryFn: ({ signal }) => callApi(getKeeping, {}, { signal }),
});

export function useRemoveRecordings() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ seriesId, reason }: { seriesId: string; reason: string }) =>
      callApi(removeRecordings, { params: { seriesId }, body: { reason } }),
    onSettled: async (_answer, _error, { seriesId }) => {
      await client.invalidateQueries({ queryKey: queryKeys.keeping });
      await client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    },
  });
}
