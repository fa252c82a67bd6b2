/** The acts behind "create from a folder". */
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/lib/api/client";
import { createSeriesFromFolder } from "@/lib/api/keeping";
import { sendMicrophoneFile } from "@/lib/api/microphones";
import { LOUDSPEAKER_KINDS } from "@/lib/api/loudspeakers";
import type { Series } from "@/lib/series/series-schema";
import { queryKeys } from "../queries/query-keys";
import type { SeriesFolder } from "./series-folder";

export interface ReadFolder {
  folder: SeriesFolder;
  /** Of series.json, as it came. */
  text: string;
  series: Series;
}

export interface WantedSeries {
  read: ReadFolder;
  /** Of the lab, or the particulars of a new one. */
  loudspeaker: { id: string } | { maker: string; model: string; kind: string };
}

/** Microphone file first, then loudspeaker and plan at once. */
export function useCreateFromFolder() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: async ({ read, loudspeaker }: WantedSeries) => {
      const { microphone } = read.series;
      const sent =
        microphone === undefined
          ? null
          : await callApi(sendMicrophoneFile, {
              query: { file_name: microphone.file },
              body: await read.folder.open(microphone.file),
            });
      return callApi(createSeriesFromFolder, {
        body: {
          series_json: read.text,
          ...(sent === null ? {} : { microphone_digest: sent.digest }),
          ...("id" in loudspeaker
            ? { loudspeaker_id: loudspeaker.id }
            : {
                loudspeaker: {
                  ...loudspeaker,
                  kind: LOUDSPEAKER_KINDS.find((kind) => kind === loudspeaker.kind) ?? "other",
                },
              }),
        },
      });
    },
    onSuccess: async () => {
      await client.invalidateQueries({ queryKey: queryKeys.seriesLists });
      await client.invalidateQueries({ queryKey: queryKeys.loudspeakers });
    },
  });
}
