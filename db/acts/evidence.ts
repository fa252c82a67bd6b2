/** The evidence of a publication, from the rows that it was made of. */
import { toEvidencePack } from "../../lib/evidence/to-evidence";
import { toResultText } from "../../lib/result/result-text";
import { toDecisionsText } from "../../lib/review/digest-decisions";
import type { Trx } from "../client";
import { getAnalysis } from "../queries/analyses";
import { getPublication, getSnapshotText } from "../queries/publications";
import { getResult } from "../queries/results";
import { getSignedParts } from "../queries/sign-offs";
import { toFolderFiles, type SeriesFolder } from "./series-folder";

/**
 * @param publicUrl address of the installation, without a slash at the end.
 * @throws AppError "not-found", "recording.removed", "conflict.state" where it proves nothing
 */
export async function loadEvidence(
  trx: Trx,
  labId: string,
  publicationId: string,
  publicUrl: string,
): Promise<SeriesFolder> {
  const publication = await getPublication(trx, labId, publicationId);
  const signOff = await getSignedParts(trx, labId, publication.sign_off_id);
  const analysis = await getAnalysis(trx, labId, signOff.analysisId);
  const folder = `${publication.slug}-${publication.revision}`;
  const files = toEvidencePack({
    snapshotText: await getSnapshotText(trx, labId, publicationId),
    inputs: await toFolderFiles(trx, labId, analysis.inputs),
    resultText: toResultText(await getResult(trx, labId, signOff.analysisId)),
    decisionsText: toDecisionsText(signOff.decisions),
    sourceCommit: analysis.source_commit,
    publicUrl,
    folder,
  });
  return { name: folder, files, at: publication.published_at };
}
