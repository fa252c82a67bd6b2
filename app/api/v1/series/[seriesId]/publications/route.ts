import { handle } from "@/app/_server/handle";
import { forgetRevisions } from "@/app/_server/reader/find-revision";
import { toPublicationView } from "@/app/_server/views/publication-view";
import { publishSeries } from "@/db/acts/publish";
import { getLab } from "@/db/queries/labs";
import { getPublication, listPublications as listRows } from "@/db/queries/publications";
import { getSeries } from "@/db/queries/series";
import { listPublications, publish } from "@/lib/api/publications";

export const GET = handle(listPublications, ({ params, inLab, caller }) =>
  inLab(async (trx) => {
    await getSeries(trx, caller.labId, params.seriesId);
    const { slug } = await getLab(trx, caller.labId);
    const rows = await listRows(trx, caller.labId, params.seriesId);
    return { publications: rows.map((row) => toPublicationView(row, slug)) };
  }),
);

export const POST = handle(publish, async ({ params, body, inLab, caller, scope }) => {
  const view = await inLab(async (trx) => {
    const { slug, embargo_until, change_note, ...words } = body;
    const by = { ...scope, accountId: caller.accountId };
    const id = await publishSeries(trx, by, params.seriesId, {
      words,
      slug: slug ?? null,
      embargoUntil: embargo_until === null ? null : new Date(embargo_until),
      changeNote: change_note,
    });
    const lab = await getLab(trx, caller.labId);
    return toPublicationView(await getPublication(trx, caller.labId, id), lab.slug);
  });
  forgetRevisions();
  return view;
});
