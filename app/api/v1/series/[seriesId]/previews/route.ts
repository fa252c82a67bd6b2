import { handle } from "@/app/_server/handle";
import { toMakerComment, toPreviewView } from "@/app/_server/views/publication-view";
import { createPreview as create } from "@/db/acts/previews";
import { getPreview, listMakerComments, listPreviews as listRows } from "@/db/queries/previews";
import { getSeries } from "@/db/queries/series";
import { createPreview, listPreviews } from "@/lib/api/publications";
import { getEnvironment } from "@/lib/config/environment";

export const GET = handle(listPreviews, ({ params, inLab, caller }) =>
  inLab(async (trx) => {
    await getSeries(trx, caller.labId, params.seriesId);
    const previews = await listRows(trx, caller.labId, params.seriesId);
    const comments = await listMakerComments(trx, caller.labId, params.seriesId);
    return {
      previews: previews.map((row) => toPreviewView(row)),
      comments: comments.map((row) => toMakerComment(row)),
    };
  }),
);

export const POST = handle(createPreview, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const { for_whom, days, ...words } = body;
    const by = { ...scope, accountId: caller.accountId };
    const made = await create(trx, by, params.seriesId, { words, forWhom: for_whom, days });
    return {
      ...toPreviewView(await getPreview(trx, caller.labId, made.id)),
      link: `${getEnvironment().publicUrl}/preview/${made.secret}`,
    };
  }),
);
