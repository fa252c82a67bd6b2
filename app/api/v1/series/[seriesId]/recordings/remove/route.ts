import { handle } from "@/app/_server/handle";
import { removeRecordings as removeRows } from "@/db/acts/remove-recordings";
import { removeRecordings } from "@/lib/api/keeping";

export const POST = handle(removeRecordings, ({ params, body, scope, inLab }) =>
  inLab((trx) => removeRows(trx, scope, params.seriesId, body.reason)),
);
