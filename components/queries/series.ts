/** Reads and acts on series, for the screens. */
import {
  keepPreviousData,
  queryOptions,
  useMutation,
  useQueryClient,
  type QueryClient,
} from "@tanstack/react-query";
import { startAnalysis } from "@/lib/api/analyses";
import { callApi } from "@/lib/api/client";
import {
  createSeries,
  getSeries,
  getSeriesHistory,
  listSeries,
  removeSeries,
  restoreSeries,
  updatePlan,
  type SeriesView,
} from "@/lib/api/series";
import type { PlanInput } from "@/lib/series/plan-schema";
import { queryKeys, type SeriesListQuery } from "./query-keys";

/** A page of the list; the page before stands until the next one is here. */
export const seriesListQuery = (query: SeriesListQuery) =>
  queryOptions({
    queryKey: queryKeys.seriesList(query),
    queryFn: ({ signal }) => callApi(listSeries, { query }, { signal }),
    placeholderData: keepPreviousData,
    refetchInterval: 30_000,
  });

export const seriesQuery = (seriesId: string) =>
  queryOptions({
    queryKey: queryKeys.series(seriesId),
    queryFn: ({ signal }) => callApi(getSeries, { params: { seriesId } }, { signal }),
  });

export const seriesHistoryQuery = (seriesId: string) =>
  queryOptions({
    queryKey: queryKeys.history(seriesId),
    queryFn: ({ signal }) => callApi(getSeriesHistory, { params: { seriesId } }, { signal }),
  });

/** What the server answered to an act is the new truth; everything else of the series is stale. */
export function takeSeries(client: QueryClient, series: SeriesView): void {
  client.setQueryData(seriesQuery(series.id).queryKey, series);
  void client.invalidateQueries({ queryKey: queryKeys.seriesLists });
  void client.invalidateQueries({ queryKey: queryKeys.runs(series.id) });
  void client.invalidateQueries({ queryKey: queryKeys.history(series.id) });
}

export function useCreateSeries() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (input: { loudspeakerId: string; plan: PlanInput }) =>
      callApi(createSeries, { body: { loudspeaker_id: input.loudspeakerId, plan: input.plan } }),
    onSuccess: (series) => takeSeries(client, series),
  });
}

export function useUpdatePlan() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (input: { seriesId: string; plan: PlanInput; planVersion: number }) =>
      callApi(updatePlan, {
        params: { seriesId: input.seriesId },
        body: { plan: input.plan, plan_version: input.planVersion },
      }),
    onSuccess: (series) => takeSeries(client, series),
  });
}

export function useStartAnalysis(seriesId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => callApi(startAnalysis, { params: { seriesId } }),
    onSettled: () => client.invalidateQueries({ queryKey: queryKeys.series(seriesId) }),
  });
}

/** Deletes an empty series, archives one with recordings; the answer says which. */
export function useRemoveSeries(seriesId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => callApi(removeSeries, { params: { seriesId } }),
    onSuccess: async ({ outcome }) => {
      await client.invalidateQueries({ queryKey: queryKeys.seriesLists });
      if (outcome === "archived") {
        await client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
      }
    },
  });
}

export function useRestoreSeries(seriesId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => callApi(restoreSeries, { params: { seriesId } }),
    onSuccess: (series) => takeSeries(client, series),
  });
}
