import { handle } from "@/app/_server/handle";
import { forgetRevisions } from "@/app/_server/reader/find-revision";
import { toPublicationView } from "@/app/_server/views/publication-view";
import { withdrawPublication as withdrawRow } from "@/db/acts/publish";
import { getLab } from "@/db/queries/labs";
import { getPublication } from "@/db/queries/publications";
import { withdrawPublication } from "@/lib/api/publications";

export const POST = handle(withdrawPublication, async ({ params, body, inLab, caller, scope }) => {
  const view = await inLab(async (trx) => {
    const by = { ...scope, accountId: caller.accountId };
    await withdrawRow(trx, by, params.publicationId, body.reason);
    const { slug } = await getLab(trx, caller.labId);
    return toPublicationView(await getPublication(trx, caller.labId, params.publicationId), slug);
  });
  forgetRevisions();
  return view;
});
