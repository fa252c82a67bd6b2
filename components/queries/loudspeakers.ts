/** Reads and acts on loudspeakers, for the screens. */
import { keepPreviousData, queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/lib/api/client";
import {
  createLoudspeaker,
  getLoudspeaker,
  listLoudspeakers,
  putLoudspeakerPhoto,
  updateLoudspeaker,
  type LoudspeakerChange,
  type LoudspeakerInput,
} from "@/lib/api/loudspeakers";
import { queryKeys } from "./query-keys";

export const loudspeakerListQuery = (search = "") =>
  queryOptions({
    queryKey: queryKeys.loudspeakerList(search),
    queryFn: ({ signal }) => callApi(listLoudspeakers, { query: { search } }, { signal }),
    placeholderData: keepPreviousData,
  });

export const loudspeakerQuery = (loudspeakerId: string) =>
  queryOptions({
    queryKey: queryKeys.loudspeaker(loudspeakerId),
    queryFn: ({ signal }) => callApi(getLoudspeaker, { params: { loudspeakerId } }, { signal }),
  });

/** Particulars stand in every series of the loudspeaker. */
function useLoudspeakerRefresh(): () => Promise<void> {
  const client = useQueryClient();
  return async () => {
    await client.invalidateQueries({ queryKey: queryKeys.loudspeakers });
    void client.invalidateQueries({ queryKey: queryKeys.seriesLists });
    void client.invalidateQueries({ queryKey: ["series"] });
  };
}

export function useCreateLoudspeaker() {
  const refresh = useLoudspeakerRefresh();
  return useMutation({
    mutationFn: (body: LoudspeakerInput) => callApi(createLoudspeaker, { body }),
    onSuccess: refresh,
  });
}

export function useUpdateLoudspeaker() {
  const refresh = useLoudspeakerRefresh();
  return useMutation({
    mutationFn: (input: { loudspeakerId: string; change: LoudspeakerChange }) =>
      callApi(updateLoudspeaker, {
        params: { loudspeakerId: input.loudspeakerId },
        body: input.change,
      }),
    onSuccess: refresh,
  });
}

export function usePutPhoto() {
  const refresh = useLoudspeakerRefresh();
  return useMutation({
    mutationFn: (input: { loudspeakerId: string; photo: Blob }) =>
      callApi(putLoudspeakerPhoto, {
        params: { loudspeakerId: input.loudspeakerId },
        body: input.photo,
      }),
    onSuccess: refresh,
  });
}
