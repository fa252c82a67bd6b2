/** What the lab keeps, what it removes, and what leaves it as a folder. */
import { z } from "zod";
import { columnChoiceSchema } from "../series/table-columns";
import { idSchema, reasonSchema, timeSchema } from "./common";
import { loudspeakerInputSchema } from "./loudspeakers";
import { defineOperation } from "./operation";
import { seriesViewSchema } from "./series";

/** As the analysis command takes it, zipped. */
export const getSeriesFolder = defineOperation({
  id: "getSeriesFolder",
  method: "GET",
  path: "/api/v1/series/{seriesId}/folder",
  summary: "The series as a folder for the analysis command: series.json and its recordings as ZIP",
  access: "see",
  params: z.strictObject({ seriesId: idSchema }),
  query: z.strictObject({
    /** Inputs of this version of the analysis; without it what an analysis would be given now. */
    version: z.coerce.number().int().min(1).optional(),
  }),
  status: 200,
  answerMediaType: "application/zip",
  errors: [
    "not-found",
    "request.invalid",
    "series.too-few-runs",
    "calibration.missing",
    "recording.removed",
    "storage.missing",
  ],
});

/** Plans exactly the recordings of the folder; they are then uploaded, each to its place. */
export const createSeriesFromFolder = defineOperation({
  id: "createSeriesFromFolder",
  method: "POST",
  path: "/api/v1/series/from-folder",
  summary: "Start a series from the series.json of a folder, and learn which file goes where",
  access: "capture",
  body: z
    .strictObject({
      /** Text of series.json. */
      series_json: z.string().max(500_000),
      /** Of the lab already; or the particulars of a new one, the rest from series.json. */
      loudspeaker_id: idSchema.optional(),
      loudspeaker: loudspeakerInputSchema.pick({ maker: true, model: true, kind: true }).optional(),
      /** Where series.json names a microphone file: what it is known by, once sent. */
      microphone_digest: z
        .string()
        .regex(/^[0-9a-f]{64}$/)
        .optional(),
    })
    .refine((body) => (body.loudspeaker_id === undefined) !== (body.loudspeaker === undefined), {
      error: "Name a loudspeaker of the lab, or a new one.",
      path: ["loudspeaker"],
    }),
  status: 201,
  answer: z.object({
    series: seriesViewSchema,
    /** In the order of sending. */
    uploads: z.array(
      z.object({
        file: z.string(),
        slot: z.string(),
        channel: z.number().int(),
        /** Of a table: as the upload takes it. */
        columns: columnChoiceSchema.nullable(),
      }),
    ),
  }),
  errors: [
    "not-found",
    "request.invalid",
    "series.not-json",
    "series.invalid",
    "series.unknown-key",
    "series.file-name",
    "series.not-plannable",
    "series.too-few-runs",
    "calibration.missing",
    "plan.invalid",
  ],
});

/** For members, whether readers get it or not. */
export const getEvidence = defineOperation({
  id: "getEvidence",
  method: "GET",
  path: "/api/v1/publications/{publicationId}/evidence",
  summary: "Evidence of a publication: inputs, result, decisions and their digests as ZIP",
  access: "see",
  params: z.strictObject({ publicationId: idSchema }),
  status: 200,
  answerMediaType: "application/zip",
  errors: ["not-found", "conflict.state", "recording.removed", "storage.missing"],
});

export const archivedSeriesSchema = z.object({
  id: idSchema,
  number: z.string(),
  loudspeaker: z.string(),
  archived_at: timeSchema,
  /** Recordings that may be removed, and their size. */
  removable: z.number().int(),
  removable_bytes: z.number().int(),
  /** Recordings that a publication cites: never removed. */
  cited: z.number().int(),
  /** Recordings that another series or a loudspeaker shows, too. */
  shared: z.number().int(),
  /** When the retention removes them; null where the lab keeps everything. */
  due_at: timeSchema.nullable(),
});
export type ArchivedSeries = z.infer<typeof archivedSeriesSchema>;

export const getKeeping = defineOperation({
  id: "getKeeping",
  method: "GET",
  path: "/api/v1/lab/keeping",
  summary: "Retention, and the archived series that still hold recordings",
  access: "administer",
  status: 200,
  answer: z.object({
    retention_days: z.number().int().nullable(),
    /** Longest in the archive first, up to 500. */
    series: z.array(archivedSeriesSchema),
  }),
  errors: [],
});

/** Rows, results and trail stay; the bytes go. What a publication cites stays, too. */
export const removeRecordings = defineOperation({
  id: "removeRecordings",
  method: "POST",
  path: "/api/v1/series/{seriesId}/recordings/remove",
  summary: "Remove the recordings of an archived series for good",
  access: "administer",
  params: z.strictObject({ seriesId: idSchema }),
  body: z.strictObject({ reason: reasonSchema }),
  status: 200,
  answer: z.object({
    recordings: z.number().int(),
    bytes: z.number().int(),
    kept: z.number().int(),
  }),
  errors: ["not-found", "request.invalid", "conflict.state"],
});

export const exportLab = defineOperation({
  id: "exportLab",
  method: "GET",
  path: "/api/v1/lab/export",
  summary: "Everything that the lab owns, with a manifest, as ZIP",
  access: "administer",
  status: 200,
  answerMediaType: "application/zip",
  errors: [],
});

export const keepingOperations = [getKeeping, removeRecordings, exportLab] as const;
export const seriesFolderOperations = [createSeriesFromFolder, getSeriesFolder] as const;
export const evidenceOperations = [getEvidence] as const;
