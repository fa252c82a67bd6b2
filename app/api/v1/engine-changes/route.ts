import { loadEngineChanges } from "@/db/acts/engine-changes";
import { listEngineChanges } from "@/lib/api/review";
import { handle } from "../../../_server/handle";

export const GET = handle(listEngineChanges, ({ inLab, caller }) =>
  inLab((trx) => loadEngineChanges(trx, caller.labId)),
);
