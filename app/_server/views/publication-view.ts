/** From rows of publications, previews and comments to the shapes of the API. */
import type { z } from "zod";
import type { MakerCommentRow, PreviewRow } from "../../../db/queries/previews";
import type { PublicationRow } from "../../../db/queries/publications";
import type {
  MakerComment,
  previewViewSchema,
  PublicationView,
} from "../../../lib/api/publications";
import { toNewestPath, toRevisionPath } from "../../../lib/publication/addresses";
import { toPerson } from "./person-view";

export function toPublicationView(row: PublicationRow, labSlug: string): PublicationView {
  return {
    id: row.id,
    series_id: row.series_id,
    revision: row.revision,
    state: row.state,
    digest: row.digest,
    path: toRevisionPath(labSlug, row.slug, row.revision),
    newest_path: toNewestPath(labSlug, row.slug),
    embargo_until: row.embargo_until?.toISOString() ?? null,
    change_note: row.change_note,
    evidence_public: row.evidence_public,
    published_by: toPerson(row.published_by, row.publishedByName),
    published_at: row.published_at.toISOString(),
    withdrawn_at: row.withdrawn_at?.toISOString() ?? null,
    withdraw_reason: row.withdraw_reason,
  };
}

export function toPreviewView(row: PreviewRow): z.output<typeof previewViewSchema> {
  return {
    id: row.id,
    for_whom: row.for_whom,
    created_by: toPerson(row.created_by, row.createdByName),
    created_at: row.created_at.toISOString(),
    expires_at: row.expires_at.toISOString(),
    revoked_at: row.revoked_at?.toISOString() ?? null,
  };
}

export function toMakerComment(row: MakerCommentRow): MakerComment {
  return {
    id: row.id,
    preview_id: row.preview_id,
    name: row.name,
    email: row.email,
    words: row.words,
    at: row.written_at.toISOString(),
    answer: row.answer,
    answered_by: toPerson(row.answered_by, row.answeredByName),
    answered_at: row.answered_at?.toISOString() ?? null,
  };
}
