/** The maker's preview: the page as it would be, and a place for comments. */
import { z } from "zod";
import { toCommentSection, toPreviewBanner } from "../../../components/reader/preview";
import { toReaderPage } from "../../../components/reader/frame";
import { toPublicationBody } from "../../../components/reader/publication-page";
import { commentAsMaker } from "../../../db/acts/previews";
import { inLab } from "../../../db/in-lab";
import { getLab } from "../../../db/queries/labs";
import {
  findPreview,
  getPreview,
  getPreviewSnapshot,
  listMakerComments,
} from "../../../db/queries/previews";
import { digestSecret } from "../../../lib/account/secrets";
import { digestText, parseSnapshotText } from "../../../lib/publication/canonical";
import type { Units } from "../../../lib/reader/units";
import { getDatabase } from "../database";
import { packPage, type PackedPage } from "./answer-page";
import { toFooter } from "./publication-page";

type Refused = Parameters<typeof toCommentSection>[0]["refused"];

/** @returns null for a link that is unknown, revoked or expired. */
export async function drawPreview(
  secret: string,
  { refused, thanks, units }: { refused: Refused; thanks: boolean; units: Units },
): Promise<PackedPage | null> {
  const found = await findPreview(getDatabase(), digestSecret(secret));
  if (found === null) return null;
  const { labId, previewId } = found;
  const read = await inLab(getDatabase(), { labId, accountId: null }, async (trx) => {
    const preview = await getPreview(trx, labId, previewId);
    return {
      preview,
      lab: await getLab(trx, labId),
      text: await getPreviewSnapshot(trx, labId, previewId),
      comments: await listMakerComments(trx, labId, preview.series_id, previewId),
    };
  });
  const { preview, lab, text, comments } = read;
  const snapshot = parseSnapshotText(text);
  const timeZone = lab.time_zone;
  return packPage(
    refused === null ? 200 : 422,
    toReaderPage({
      title: `Preview: ${snapshot.loudspeaker.model}`,
      description: "A private preview.",
      hidden: true,
      script: true,
      body: toPublicationBody({
        snapshot,
        digest: digestText(text),
        timeZone,
        units,
        banner: toPreviewBanner({
          forWhom: preview.for_whom,
          lab: lab.name,
          expiresAt: preview.expires_at,
          timeZone,
        }),
        after: toCommentSection({
          comments: comments.map(({ name, words, written_at: at, answer }) => ({
            name,
            words,
            at,
            answer,
          })),
          timeZone,
          lab: lab.name,
          refused,
          thanks,
        }),
      }),
      footer: toFooter(snapshot),
    }),
  );
}

const commentSchema = z.object({
  name: z.string().trim().min(1, "Give your name.").max(120),
  email: z.email("Give an e-mail address that the lab can answer."),
  words: z.string().trim().min(1, "Write a comment.").max(5000, "At most 5000 characters."),
});

/** @returns what was wrong with the form; null where the comment is kept. Asks `count` before it writes. */
export async function leaveComment(
  secret: string,
  form: FormData,
  count: (key: string) => Promise<string | null>,
): Promise<Refused | "no such link"> {
  const found = await findPreview(getDatabase(), digestSecret(secret));
  if (found === null) return "no such link";
  const text = (name: string): string => {
    const value = form.get(name);
    return typeof value === "string" ? value.slice(0, 6000) : "";
  };
  const sent = { name: text("name"), email: text("email").trim(), words: text("words") };
  const parsed = commentSchema.safeParse(sent);
  if (!parsed.success) {
    return { ...sent, why: parsed.error.issues[0]?.message ?? "Fill in every field." };
  }
  const tooMany = await count(found.previewId);
  if (tooMany !== null) return { ...sent, why: tooMany };
  const { labId, previewId } = found;
  await inLab(getDatabase(), { labId, accountId: null }, (trx) =>
    commentAsMaker(trx, labId, previewId, parsed.data),
  );
  return null;
}
