import { handle } from "@/app/_server/handle";
import { toTrailEvent } from "@/app/_server/views/people";
import { listLabEvents } from "@/db/queries/audit";
import { listTrail } from "@/lib/api/labs";
import { toTrailRooms } from "@/lib/labs/trail-about";

export const GET = handle(listTrail, ({ inLab, scope, query }) =>
  inLab(async (trx) => {
    const { before, about, page_size: size } = query;
    const rows = await listLabEvents(trx, scope.labId, {
      before,
      limit: size + 1,
      about: about === undefined ? undefined : toTrailRooms(about),
    });
    return { events: rows.slice(0, size).map(toTrailEvent), more: rows.length > size };
  }),
);
