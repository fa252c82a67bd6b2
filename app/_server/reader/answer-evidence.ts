/** The evidence of a revision, where the lab gave it to readers. */
import { loadEvidence } from "../../../db/acts/evidence";
import { inLab } from "../../../db/in-lab";
import { findPublication, getPublication } from "../../../db/queries/publications";
import { getEnvironment } from "../../../lib/config/environment";
import { parseRevision } from "../../../lib/publication/addresses";
import { answerZip } from "../answer-zip";
import { getDatabase } from "../database";
import { answerNotFound, answerReader } from "./plain-answers";

/** @param params of /t/[lab]/[series]/[revision]/evidence.zip */
export function answerEvidence(
  request: Request,
  { lab, series, revision }: Record<string, string | string[] | undefined>,
): Promise<Response> {
  return answerReader(request, async () => {
    const wanted = typeof revision === "string" ? parseRevision(revision) : null;
    const folder =
      typeof lab === "string" && typeof series === "string" && wanted !== null
        ? await findEvidence({ lab, slug: series, revision: wanted })
        : null;
    if (folder === null) {
      return answerNotFound(request, "The lab gives no evidence to readers at this address.");
    }
    // Large, and gone with a withdrawal at once: kept by nobody on the way.
    return answerZip(folder, { "x-content-type-options": "nosniff" });
  });
}

/** Null where there is none for readers: not published, withdrawn, or kept by the lab. */
async function findEvidence(address: { lab: string; slug: string; revision: number }) {
  const found = await findPublication(getDatabase(), address);
  if (found === null) return null;
  const { labId, publicationId } = found;
  return inLab(getDatabase(), { labId, accountId: null }, async (trx) => {
    const { evidence_public, state } = await getPublication(trx, labId, publicationId);
    if (!evidence_public || state === "withdrawn") return null;
    return loadEvidence(trx, labId, publicationId, getEnvironment().publicUrl);
  });
}
