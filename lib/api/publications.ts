import { z } from "zod";
import { PUBLICATION_STATES, snapshotSchema } from "../publication/snapshot-schema";
import { idSchema, personSchema, reasonSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";

const seriesParams = z.strictObject({ seriesId: idSchema });
const params = z.strictObject({ publicationId: idSchema });

export const publicationViewSchema = z.object({
  id: idSchema,
  series_id: idSchema,
  revision: z.number().int(),
  state: z.enum(PUBLICATION_STATES),
  digest: z.string(),
  /** "/t/withy-bench/osier-8a/2" and, for the newest, "/t/withy-bench/osier-8a". */
  path: z.string(),
  newest_path: z.string(),
  embargo_until: timeSchema.nullable(),
  change_note: z.string().nullable(),
  evidence_public: z.boolean(),
  published_by: personSchema.nullable(),
  published_at: timeSchema,
  withdrawn_at: timeSchema.nullable(),
  withdraw_reason: z.string().nullable(),
});
export type PublicationView = z.infer<typeof publicationViewSchema>;

/** What the reviewer may add; figures come from the signed analysis alone. */
export const publicationInputSchema = z.strictObject({
  words: z.string().trim().max(5000).default(""),
  supplied_by: z.string().trim().min(3, "Say who supplied the unit.").max(200),
  maker_statement: z
    .strictObject({
      name: z.string().trim().min(1).max(200),
      words: z.string().trim().min(1).max(5000),
    })
    .nullable()
    .default(null),
  answer_to_maker: z.string().trim().max(5000).nullable().default(null),
  evidence_public: z.boolean().default(false),
});

export const listPublications = defineOperation({
  id: "listPublications",
  method: "GET",
  path: "/api/v1/series/{seriesId}/publications",
  summary: "Revisions of a series' publication, newest first",
  access: "see",
  params: seriesParams,
  status: 200,
  answer: z.object({ publications: z.array(publicationViewSchema) }),
  errors: ["not-found"],
});

/** The first publication, or a correction: then change_note is needed. */
export const publish = defineOperation({
  id: "publish",
  method: "POST",
  path: "/api/v1/series/{seriesId}/publications",
  summary: "Publish the signed analysis, or a corrected revision with a change note",
  access: "publish",
  params: seriesParams,
  body: publicationInputSchema.extend({
    slug: z
      .string()
      .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/)
      .max(80)
      .optional(),
    embargo_until: timeSchema.nullable().default(null),
    change_note: z.string().trim().min(3).max(1000).nullable().default(null),
  }),
  status: 201,
  answer: publicationViewSchema,
  errors: [
    "not-found",
    "request.invalid",
    "conflict.state",
    "conflict.exists",
    "run.reason-missing",
    "recording.removed",
    "storage.missing",
  ],
});

export const withdrawPublication = defineOperation({
  id: "withdrawPublication",
  method: "POST",
  path: "/api/v1/publications/{publicationId}/withdraw",
  summary: "Withdraw a publication; a page that says why stays",
  access: "publish",
  params,
  body: z.strictObject({ reason: reasonSchema }),
  status: 200,
  answer: publicationViewSchema,
  errors: ["not-found", "request.invalid", "conflict.state"],
});

/** What a reviewer takes along; the files themselves are public, under the revision's address. */
export const summaryKitSchema = z.object({
  publication_id: idSchema,
  /** Absolute addresses: of the revision's page and, below it, of its card and files. */
  page: z.string(),
  card: z.string(),
  files: z.object({
    png: z.string(),
    svg: z.string(),
    link_png: z.string(),
    pdf_a4: z.string(),
    pdf_letter: z.string(),
    csv: z.string(),
    json: z.string(),
  }),
  /** Code of the card in two sizes. */
  embed: z.object({ wide: z.string(), narrow: z.string() }),
  narrow_height: z.number().int(),
  sentence: z.string(),
  alt_text: z.string(),
  /** Addresses lead nowhere before this. */
  embargo_until: timeSchema.nullable(),
});
export type SummaryKit = z.infer<typeof summaryKitSchema>;

export const getSummaryKit = defineOperation({
  id: "getSummaryKit",
  method: "GET",
  path: "/api/v1/publications/{publicationId}/kit",
  summary: "Embed code, article sentence, alt text and addresses of the files of a publication",
  access: "see",
  params,
  status: 200,
  answer: summaryKitSchema,
  errors: ["not-found", "conflict.state"],
});

/** The page as it would be, without keeping anything. */
export const draftPublication = defineOperation({
  id: "draftPublication",
  method: "POST",
  path: "/api/v1/series/{seriesId}/publications/draft",
  summary: "The snapshot as it would be published now",
  access: "see",
  params: seriesParams,
  body: publicationInputSchema.partial(),
  status: 200,
  answer: snapshotSchema,
  errors: ["not-found", "request.invalid", "conflict.state"],
});

export const previewViewSchema = z.object({
  id: idSchema,
  for_whom: z.string(),
  created_by: personSchema.nullable(),
  created_at: timeSchema,
  expires_at: timeSchema,
  revoked_at: timeSchema.nullable(),
});

export const makerCommentSchema = z.object({
  id: idSchema,
  preview_id: idSchema,
  name: z.string(),
  email: z.string(),
  words: z.string(),
  at: timeSchema,
  answer: z.string().nullable(),
  answered_by: personSchema.nullable(),
  answered_at: timeSchema.nullable(),
});
export type MakerComment = z.infer<typeof makerCommentSchema>;

export const listPreviews = defineOperation({
  id: "listPreviews",
  method: "GET",
  path: "/api/v1/series/{seriesId}/previews",
  summary: "Private links for the maker, and the comments left through them",
  access: "see",
  params: seriesParams,
  status: 200,
  answer: z.object({
    previews: z.array(previewViewSchema),
    comments: z.array(makerCommentSchema),
  }),
  errors: ["not-found"],
});

/** The link is shown once. */
export const createPreview = defineOperation({
  id: "createPreview",
  method: "POST",
  path: "/api/v1/series/{seriesId}/previews",
  summary: "A private link for the maker that expires",
  access: "publish",
  params: seriesParams,
  body: publicationInputSchema.extend({
    for_whom: z.string().trim().min(1).max(200),
    days: z.number().int().min(1).max(90).default(14),
  }),
  status: 201,
  answer: previewViewSchema.extend({ link: z.string() }),
  errors: ["not-found", "request.invalid", "conflict.state"],
});

export const revokePreview = defineOperation({
  id: "revokePreview",
  method: "POST",
  path: "/api/v1/previews/{previewId}/revoke",
  summary: "Revoke a private link",
  access: "publish",
  params: z.strictObject({ previewId: idSchema }),
  status: 200,
  answer: previewViewSchema,
  errors: ["not-found", "conflict.state"],
});

export const answerMakerComment = defineOperation({
  id: "answerMakerComment",
  method: "PUT",
  path: "/api/v1/maker-comments/{commentId}/answer",
  summary: "Answer the maker's comment",
  access: "publish",
  params: z.strictObject({ commentId: idSchema }),
  body: z.strictObject({ answer: z.string().trim().min(1).max(5000) }),
  status: 200,
  answer: makerCommentSchema,
  errors: ["not-found", "request.invalid"],
});

export const publicationOperations = [
  listPublications,
  publish,
  withdrawPublication,
  getSummaryKit,
  draftPublication,
  listPreviews,
  createPreview,
  revokePreview,
  answerMakerComment,
] as const;
