/** Folders that leave the lab: a series, the evidence of a publication. */
import { z } from "zod";
import { idSchema } from "./common";
import { defineOperation } from "./operation";

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

export const seriesFolderOperations = [getSeriesFolder] as const;
export const evidenceOperations = [getEvidence] as const;
