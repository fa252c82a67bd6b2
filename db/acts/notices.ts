/**
 * Notices by mail of what happened to a series: written in the transaction of the act, to every
 * member whose work it touches and who wants to hear of it, but not to who did it.
 */
import type { Failure } from "../../lib/api/series";
import type { MailContent } from "../../lib/mail/mail-schema";
import { NOTICES, type NoticeKind } from "../../lib/mail/notices";
import { toNewestPath } from "../../lib/publication/addresses";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { getLab } from "../queries/labs";
import { getLoudspeaker } from "../queries/loudspeakers";
import { enqueueMail } from "../queries/mails";
import { listNames } from "../queries/members";
import { listRecipients } from "../queries/notice-choices";
import { getSeries, toSeriesNumber } from "../queries/series";

/** What happened to a series, without what can be looked up: its names and who did it. */
type SeriesNotice = Extract<MailContent, { kind: NoticeKind }>;
type LookedUp = "lab" | "time_zone" | "series_id" | "series" | "loudspeaker" | "by";
type Happening<Notice = SeriesNotice> = Notice extends SeriesNotice
  ? Omit<Notice, LookedUp>
  : never;

export const noticeAnalysisFailed = (
  trx: Trx,
  by: LabScope,
  seriesId: string,
  version: number,
  { message, remedy, file, report }: Failure,
): Promise<void> =>
  send(trx, by, seriesId, { kind: "analysis-failed", version, message, remedy, file, report });

export const noticeReadyForReview = (
  trx: Trx,
  by: LabScope,
  seriesId: string,
  version: number,
): Promise<void> => send(trx, by, seriesId, { kind: "ready-for-review", version });

export const noticeRunAsked = (
  trx: Trx,
  by: LabScope,
  seriesId: string,
  asked: { label: string; levelDb: number; reason: string },
): Promise<void> =>
  send(trx, by, seriesId, {
    kind: "run-asked",
    label: asked.label,
    level_dB: asked.levelDb,
    reason: asked.reason,
  });

export const noticeSignedOff = (
  trx: Trx,
  by: LabScope,
  seriesId: string,
  signed: { version: number; criterion: string },
): Promise<void> => send(trx, by, seriesId, { kind: "signed-off", ...signed });

export const noticeReopened = (
  trx: Trx,
  by: LabScope,
  seriesId: string,
  reopened: { version: number; reason: string },
): Promise<void> => send(trx, by, seriesId, { kind: "reopened", ...reopened });

export async function noticePublished(
  trx: Trx,
  by: LabScope,
  seriesId: string,
  out: { slug: string; revision: number; changeNote: string | null; embargoUntil: Date | null },
): Promise<void> {
  const lab = await getLab(trx, by.labId);
  await send(trx, by, seriesId, {
    kind: "published",
    revision: out.revision,
    path: toNewestPath(lab.slug, out.slug),
    change_note: out.changeNote,
    embargo_until: out.embargoUntil?.toISOString() ?? null,
  });
}

export const noticeMakerComment = (
  trx: Trx,
  by: LabScope,
  seriesId: string,
  { from, words }: { from: string; words: string },
): Promise<void> => send(trx, by, seriesId, { kind: "maker-comment", from, comment: words });

async function send(trx: Trx, by: LabScope, seriesId: string, happening: Happening): Promise<void> {
  const { kind } = happening;
  const { roles } = NOTICES[kind];
  const recipients = await listRecipients(trx, by.labId, { kind, roles, except: by.accountId });
  if (recipients.length === 0) return;
  const lab = await getLab(trx, by.labId);
  const series = await getSeries(trx, by.labId, seriesId);
  const { maker, model } = await getLoudspeaker(trx, by.labId, series.loudspeaker_id);
  const about = {
    lab: lab.name,
    time_zone: lab.time_zone,
    series_id: seriesId,
    series: toSeriesNumber(series.number),
    loudspeaker: `${maker} ${model}`.trim(),
  };
  const names = await listNames(trx, [by.accountId]);
  const actor = { by: names.get(by.accountId ?? "") ?? "The lab" };
  const content = toContent(happening, about, actor);
  for (const { accountId, email } of recipients) {
    await enqueueMail(trx, { labId: by.labId, accountId, to: email, content });
  }
}

/** Only what people do names a person. */
function toContent(
  happening: Happening,
  about: Pick<SeriesNotice, Exclude<LookedUp, "by">>,
  actor: { by: string },
): SeriesNotice {
  switch (happening.kind) {
    case "analysis-failed":
    case "ready-for-review":
    case "maker-comment":
      return { ...happening, ...about };
    case "run-asked":
    case "signed-off":
    case "reopened":
    case "published":
      return { ...happening, ...about, ...actor };
  }
}
