import { answerZip } from "@/app/_server/answer-zip";
import { handle } from "@/app/_server/handle";
import { loadSeriesFolder } from "@/db/acts/series-folder";
import { getSeriesFolder } from "@/lib/api/keeping";

export const GET = handle(getSeriesFolder, async ({ params, query, inLab, caller }) =>
  answerZip(
    await inLab((trx) =>
      loadSeriesFolder(trx, caller.labId, params.seriesId, query.version ?? null),
    ),
  ),
);
