import { answerZip } from "@/app/_server/answer-zip";
import { handle } from "@/app/_server/handle";
import { loadEvidence } from "@/db/acts/evidence";
import { getEvidence } from "@/lib/api/keeping";
import { getEnvironment } from "@/lib/config/environment";

export const GET = handle(getEvidence, async ({ params, inLab, caller }) =>
  answerZip(
    await inLab((trx) =>
      loadEvidence(trx, caller.labId, params.publicationId, getEnvironment().publicUrl),
    ),
  ),
);
