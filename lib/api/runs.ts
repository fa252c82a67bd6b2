import { z } from "zod";
import { arrivalReportSchema, RUN_STATES } from "../runs/arrival-schema";
import { columnChoiceSchema } from "../series/table-columns";
import { RECORDING_ROLES } from "../series/planned-runs";
import { idSchema, personSchema, reasonSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";

export const runViewSchema = z.object({
  id: idSchema,
  /** Place in the plan; null where the file fits none yet. */
  slot: z.string().nullable(),
  take: z.number().int(),
  role: z.enum(RECORDING_ROLES).nullable(),
  level_dB: z.number().nullable(),
  file_name: z.string(),
  digest: z.string(),
  bytes: z.number().int(),
  /** When its bytes were removed for good; its report and results stay. */
  removed_at: timeSchema.nullable(),
  channel: z.number().int(),
  state: z.enum(RUN_STATES),
  report: arrivalReportSchema.nullable(),
  reason: z.string().nullable(),
  reason_by: personSchema.nullable(),
  uploaded_by: personSchema.nullable(),
  uploaded_at: timeSchema,
});
export type RunView = z.infer<typeof runViewSchema>;

export const uploadViewSchema = z.object({
  id: z.string(),
  slot: z.string().nullable(),
  file_name: z.string(),
  bytes: z.number().int(),
  received: z.number().int(),
  expires_at: timeSchema,
});
export type UploadView = z.infer<typeof uploadViewSchema>;

export const slotViewSchema = z.object({
  slot: z.string(),
  /** Whether a recording may be made now; a lock gives its reason. */
  open: z.boolean(),
  lock_reason: z.string().nullable(),
  /** Excused without a recording, with this reason. */
  excused: z.string().nullable(),
});
export type SlotView = z.infer<typeof slotViewSchema>;

const seriesParams = z.strictObject({ seriesId: idSchema });
const runParams = z.strictObject({ runId: idSchema });

export const listRuns = defineOperation({
  id: "listRuns",
  method: "GET",
  path: "/api/v1/series/{seriesId}/runs",
  summary: "Recordings of a series, unfinished uploads, and which levels are open",
  access: "see",
  params: seriesParams,
  status: 200,
  answer: z.object({
    runs: z.array(runViewSchema),
    uploads: z.array(uploadViewSchema),
    slots: z.array(slotViewSchema),
    captured: z.number().int(),
    planned: z.number().int(),
    /** Set where a run broke the stop rule: do not go louder, and why. */
    stop_rule: z.string().nullable(),
  }),
  errors: ["not-found"],
});

export const getRun = defineOperation({
  id: "getRun",
  method: "GET",
  path: "/api/v1/runs/{runId}",
  summary: "One recording with its arrival report",
  access: "see",
  params: runParams,
  status: 200,
  answer: runViewSchema,
  errors: ["not-found"],
});

export const runActSchema = z.discriminatedUnion("act", [
  z.strictObject({ act: z.literal("assign"), slot: z.string().max(60) }),
  z.strictObject({
    act: z.literal("choose-channel"),
    channel: z.number().int().min(1).max(64),
  }),
  z.strictObject({ act: z.literal("keep"), reason: reasonSchema }),
  z.strictObject({ act: z.literal("withdraw-keep") }),
  z.strictObject({ act: z.literal("exclude"), reason: reasonSchema }),
  z.strictObject({ act: z.literal("bring-back") }),
  z.strictObject({ act: z.literal("check-again") }),
]);
export type RunAct = z.infer<typeof runActSchema>;

/** One act at a time, told by `act`. */
export const actOnRun = defineOperation({
  id: "actOnRun",
  method: "POST",
  path: "/api/v1/runs/{runId}/acts",
  summary:
    "Assign, choose the channel, keep a failed take, withdraw that, exclude or bring back a recording",
  access: "capture",
  params: runParams,
  body: runActSchema,
  status: 200,
  answer: runViewSchema,
  errors: ["not-found", "request.invalid", "conflict.state", "run.locked", "audio.channel-missing"],
});

/** A run that was in the plan is excluded, never removed. */
export const removeRun = defineOperation({
  id: "removeRun",
  method: "DELETE",
  path: "/api/v1/runs/{runId}",
  summary: "Remove a recording that was never assigned",
  access: "capture",
  params: runParams,
  status: 204,
  errors: ["not-found", "conflict.state"],
});

export const downloadRun = defineOperation({
  id: "downloadRun",
  method: "GET",
  path: "/api/v1/runs/{runId}/file",
  summary: "The recording as it was uploaded",
  access: "see",
  params: runParams,
  status: 200,
  answerMediaType: "application/octet-stream",
  ranged: true,
  errors: ["not-found", "recording.removed", "storage.missing"],
});

export const excuseSlot = defineOperation({
  id: "excuseSlot",
  method: "PUT",
  path: "/api/v1/series/{seriesId}/slots/{slot}/excuse",
  summary: "Excuse a planned run without a recording, or withdraw that with null",
  access: "capture",
  params: z.strictObject({ seriesId: idSchema, slot: z.string().max(60) }),
  body: z.strictObject({ reason: reasonSchema.nullable() }),
  status: 200,
  answer: slotViewSchema,
  errors: ["not-found", "request.invalid", "conflict.state"],
});

/**
 * Resumable uploads by the tus protocol 1.0 at UPLOADS_PATH. The creation carries this metadata;
 * the answer to the last byte carries the header `tidemark-run-id`.
 */
export const uploadMetadataSchema = z.strictObject({
  seriesId: idSchema,
  fileName: z.string().trim().min(1).max(200),
  slot: z.string().max(60).optional(),
  channel: z.coerce.number().int().min(1).max(64).optional(),
  /** Of a table, as JSON: which column holds what, where its head does not tell. */
  columns: z
    .string()
    .max(2000)
    .transform((text, context) => {
      try {
        return JSON.parse(text) as unknown;
      } catch {
        context.addIssue({ code: "custom", message: "must be JSON" });
        return z.NEVER;
      }
    })
    .pipe(columnChoiceSchema)
    .optional(),
});
export type UploadMetadata = z.infer<typeof uploadMetadataSchema>;
export const UPLOADS_PATH = "/api/v1/uploads";

export const runOperations = [
  listRuns,
  getRun,
  actOnRun,
  removeRun,
  downloadRun,
  excuseSlot,
] as const;
