/** What a reviewer takes along of one publication. */
import type { PublicationRow } from "../../../db/queries/publications";
import type { SummaryKit } from "../../../lib/api/publications";
import { getEnvironment } from "../../../lib/config/environment";
import { AppError } from "../../../lib/errors/app-error";
import { NARROW_CARD, WIDE_CARD } from "../../../lib/kit/card-layout";
import { toAltText, toArticleSentence } from "../../../lib/kit/kit-words";
import { toEmbedCode } from "../../../lib/kit/oembed";
import { toRevisionPath } from "../../../lib/publication/addresses";
import type { Snapshot } from "../../../lib/publication/snapshot-schema";

/** @throws AppError "conflict.state" for a withdrawn one: its figures are not handed out any more */
export function toSummaryKit(
  row: PublicationRow,
  snapshot: Snapshot,
  timeZone: string,
): SummaryKit {
  if (row.state === "withdrawn") {
    throw new AppError(
      "conflict.state",
      `Revision ${row.revision} was withdrawn: its figures are not handed out any more. Publish a corrected revision first.`,
    );
  }
  const path = toRevisionPath(snapshot.lab.slug, row.slug, row.revision);
  const page = `${getEnvironment().publicUrl}${path}`;
  const card = `${page}/card`;
  const title = `${snapshot.loudspeaker.model}: how loud it plays`;
  return {
    publication_id: row.id,
    page,
    card,
    files: {
      png: `${page}/figure.png`,
      svg: `${page}/figure.svg`,
      link_png: `${page}/og.png`,
      pdf_a4: `${page}/report.pdf?paper=a4`,
      pdf_letter: `${page}/report.pdf?paper=letter`,
      csv: `${page}/values.csv`,
      json: `${page}/values.json`,
    },
    embed: {
      wide: toEmbedCode({ card, title, size: WIDE_CARD }),
      narrow: toEmbedCode({ card, title, size: NARROW_CARD }),
    },
    narrow_height: NARROW_CARD.height,
    sentence: toArticleSentence(snapshot, timeZone),
    alt_text: toAltText(snapshot),
    embargo_until: row.embargo_until?.toISOString() ?? null,
  };
}
