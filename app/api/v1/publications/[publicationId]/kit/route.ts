import { handle } from "@/app/_server/handle";
import { toSummaryKit } from "@/app/_server/views/summary-kit-view";
import { getLab } from "@/db/queries/labs";
import { getPublication, getSnapshotText } from "@/db/queries/publications";
import { getSummaryKit } from "@/lib/api/publications";
import { parseSnapshotText } from "@/lib/publication/canonical";

export const GET = handle(getSummaryKit, ({ params, inLab, caller }) =>
  inLab(async (trx) => {
    const row = await getPublication(trx, caller.labId, params.publicationId);
    const lab = await getLab(trx, caller.labId);
    const text = await getSnapshotText(trx, caller.labId, row.id);
    return toSummaryKit(row, parseSnapshotText(text), lab.time_zone);
  }),
);
