import { handle } from "@/app/_server/handle";
import { loadSeriesView } from "@/app/_server/views/series-view";
import { startFromFolder } from "@/db/acts/start-from-folder";
import { createSeriesFromFolder } from "@/lib/api/keeping";

export const POST = handle(createSeriesFromFolder, ({ body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const by = { ...scope, accountId: caller.accountId };
    const { seriesId, uploads } = await startFromFolder(trx, by, {
      text: body.series_json,
      loudspeakerId: body.loudspeaker_id ?? null,
      loudspeaker: body.loudspeaker ?? null,
      microphoneDigest: body.microphone_digest ?? null,
    });
    return { series: await loadSeriesView(trx, caller.labId, seriesId), uploads };
  }),
);
