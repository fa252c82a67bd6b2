/** Publishing, correcting and withdrawing: one transaction each, with its line in the trail. */
import { digestText, toSnapshotText } from "../../lib/publication/canonical";
import { toSlug } from "../../lib/publication/addresses";
import type { Snapshot } from "../../lib/publication/snapshot-schema";
import { toSnapshot, type PublicationWords } from "../../lib/publication/to-snapshot";
import { toResultText } from "../../lib/result/result-text";
import { AppError } from "../../lib/errors/app-error";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { getAnalysis } from "../queries/analyses";
import { recordEvent } from "../queries/audit";
import { notifyChange } from "../queries/changes";
import { getLab } from "../queries/labs";
import { getLoudspeaker } from "../queries/loudspeakers";
import {
  getPublication,
  insertPublication,
  isSlugTaken,
  listPublications,
  slugTaken,
  withdraw,
  type PublicationRow,
} from "../queries/publications";
import { getResult } from "../queries/results";
import { listRuns } from "../queries/runs";
import { getSeries, lockSeries, toSeriesNumber } from "../queries/series";
import { findStandingSignOff, getSignedParts } from "../queries/sign-offs";
import { noticePublished } from "./notices";
import { toFolderFiles } from "./series-folder";

export interface Publishing {
  words: PublicationWords;
  /** Of the address; only the first publication chooses it. */
  slug: string | null;
  embargoUntil: Date | null;
  changeNote: string | null;
}

/** @returns id of the new revision. @throws AppError "conflict.state", "conflict.exists", "run.reason-missing" */
export async function publishSeries(
  trx: Trx,
  by: LabScope & { accountId: string },
  seriesId: string,
  publishing: Publishing,
): Promise<string> {
  await lockSeries(trx, by.labId, seriesId);
  const before = await listPublications(trx, by.labId, seriesId);
  const last = before[0] ?? null;
  if (last !== null && publishing.changeNote === null) {
    throw new AppError(
      "run.reason-missing",
      `Revision ${last.revision} is out already. Say in a change note what this one corrects.`,
    );
  }
  if (last !== null && publishing.slug !== null && publishing.slug !== last.slug) {
    throw new AppError(
      "conflict.state",
      `This series is published as "${last.slug}". An address never moves.`,
    );
  }
  const now = new Date();
  const embargoUntil = toEmbargo(publishing.embargoUntil, last, now);
  const drafted = await draftSnapshot(trx, by, seriesId, { ...publishing, at: now });
  if (publishing.words.evidence_public) await requireEvidence(trx, by.labId, drafted.signOffId);
  const { slug } = drafted.snapshot.series;
  if (last === null && (await isSlugTaken(trx, by.labId, slug, seriesId))) throw slugTaken(slug);
  const snapshot = toSnapshotText(drafted.snapshot);
  const digest = digestText(snapshot);
  const id = await insertPublication(trx, by.labId, {
    seriesId,
    signOffId: drafted.signOffId,
    slug,
    revision: drafted.snapshot.revision,
    snapshot,
    digest,
    embargoUntil,
    changeNote: drafted.snapshot.change_note,
    evidencePublic: publishing.words.evidence_public,
    publishedBy: by.accountId,
    publishedAt: now,
  });
  await recordEvent(trx, by, {
    act: last === null ? "publication.published" : "publication.corrected",
    subjectType: "publication",
    subjectId: id,
    seriesId,
    details: {
      revision: drafted.snapshot.revision,
      slug,
      digest,
      version: drafted.snapshot.analysis.version,
      ...(embargoUntil === null ? {} : { embargo_until: embargoUntil.toISOString() }),
      ...(publishing.changeNote === null ? {} : { reason: publishing.changeNote }),
    },
  });
  await noticePublished(trx, by, seriesId, {
    slug,
    revision: drafted.snapshot.revision,
    changeNote: publishing.changeNote,
    embargoUntil,
  });
  await notifyChange(trx, { labId: by.labId, seriesId });
  return id;
}

/** What readers are promised is there. @throws AppError "recording.removed", "storage.missing" */
async function requireEvidence(trx: Trx, labId: string, signOffId: string): Promise<void> {
  const { analysisId } = await getSignedParts(trx, labId, signOffId);
  const { inputs } = await getAnalysis(trx, labId, analysisId);
  await toFolderFiles(trx, labId, inputs);
}

/** A correction is seen at once; only one of something that nobody has seen yet may wait. */
function toEmbargo(wanted: Date | null, last: PublicationRow | null, now: Date): Date | null {
  const hidden =
    last !== null &&
    last.state === "live" &&
    last.embargo_until !== null &&
    last.embargo_until > now;
  const until = wanted ?? (hidden ? last.embargo_until : null);
  if (until === null || until <= now) return null;
  if (last !== null && !hidden) {
    throw new AppError(
      "conflict.state",
      "An embargo holds back a first publication only: a correction is seen at once.",
    );
  }
  return until;
}

/**
 * The snapshot as it would be published now; nothing is written.
 *
 * @throws AppError "not-found"; "conflict.state" without a sign-off in force
 */
export async function draftSnapshot(
  trx: Trx,
  by: LabScope,
  seriesId: string,
  draft: { words: PublicationWords; slug: string | null; changeNote: string | null; at: Date },
): Promise<{ snapshot: Snapshot; signOffId: string }> {
  const { labId } = by;
  const series = await getSeries(trx, labId, seriesId);
  const signOff = await findStandingSignOff(trx, labId, seriesId);
  if (signOff === null) {
    throw new AppError(
      "conflict.state",
      "This series is not signed off. An analyst decides every band and signs off first.",
    );
  }
  const { decisions } = await getSignedParts(trx, labId, signOff.id);
  const lab = await getLab(trx, labId);
  const loudspeaker = await getLoudspeaker(trx, labId, series.loudspeaker_id);
  const analysis = await getAnalysis(trx, labId, signOff.analysis_id);
  const result = await getResult(trx, labId, signOff.analysis_id);
  const last = (await listPublications(trx, labId, seriesId))[0] ?? null;
  const used = new Set(analysis.inputs.files.map((file) => file.run_id));
  const recorded = (await listRuns(trx, labId, seriesId))
    .filter((run) => used.has(run.id))
    .map((run) => run.uploaded_at.getTime());
  const snapshot = toSnapshot({
    lab: { slug: lab.slug, name: lab.name },
    series: {
      number: toSeriesNumber(series.number),
      slug: last?.slug ?? draft.slug ?? toSlug(loudspeaker.model),
    },
    loudspeaker: {
      maker: loudspeaker.maker,
      model: loudspeaker.model,
      serial: loudspeaker.serial,
      kind: loudspeaker.kind,
      largest_dimension_m: loudspeaker.largest_dimension_m,
      tuning_Hz: loudspeaker.tuning_hz,
      photo_digest: loudspeaker.photo_digest,
    },
    plan: series.plan,
    firstRecordingAt:
      recorded.length === 0 ? analysis.requested_at : new Date(Math.min(...recorded)),
    analysis: { version: analysis.version, engineVersion: analysis.engine_version },
    result,
    signOff: {
      criterion: signOff.criterion,
      decisions,
      decisionsDigest: signOff.decisions_digest,
      resultDigest: checkResultDigest(toResultText(result), signOff.result_digest),
      onePerson: signOff.one_person,
      by: signOff.by.name,
      at: new Date(signOff.at),
    },
    revision: (last?.revision ?? 0) + 1,
    publishedAt: draft.at,
    publishedBy: await nameOf(trx, by.accountId),
    changeNote: last === null ? null : draft.changeNote,
    words: draft.words,
  });
  return { snapshot, signOffId: signOff.id };
}

/** What is published is what was signed, to the byte. @throws AppError "conflict.state" */
function checkResultDigest(text: string, signed: string): string {
  const digest = digestText(text);
  if (digest === signed) return digest;
  throw new AppError(
    "conflict.state",
    "The result kept for this analysis is not the one that was signed. Reopen the series and sign off again.",
    { details: { signed, kept: digest } },
  );
}

/** @throws AppError "not-found", "conflict.state" */
export async function withdrawPublication(
  trx: Trx,
  by: LabScope & { accountId: string },
  publicationId: string,
  reason: string,
): Promise<void> {
  const row = await getPublication(trx, by.labId, publicationId);
  await lockSeries(trx, by.labId, row.series_id);
  if (!(await withdraw(trx, by.labId, publicationId, { accountId: by.accountId, reason }))) {
    const { state } = await getPublication(trx, by.labId, publicationId);
    throw new AppError("conflict.state", `Revision ${row.revision} is ${state} already.`, {
      details: { state },
    });
  }
  await recordEvent(trx, by, {
    act: "publication.withdrawn",
    subjectType: "publication",
    subjectId: publicationId,
    seriesId: row.series_id,
    details: { revision: row.revision, slug: row.slug, reason },
  });
  await notifyChange(trx, { labId: by.labId, seriesId: row.series_id });
}

async function nameOf(trx: Trx, accountId: string | null): Promise<string> {
  if (accountId === null) return "the lab";
  const row = await trx
    .selectFrom("accounts")
    .select("name")
    .where("id", "=", accountId)
    .executeTakeFirst();
  return row?.name ?? "somebody";
}
