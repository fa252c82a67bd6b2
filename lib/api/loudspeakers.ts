import { z } from "zod";
import { idSchema, personSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";

export const LOUDSPEAKER_KINDS = [
  "active, two-way",
  "active, three-way",
  "active, coaxial",
  "active, full-range",
  "active, portable",
  "active, battery",
  "active, stage",
  "active, subwoofer",
  "passive, two-way",
  "passive, three-way",
  "passive, centre",
  "passive, full-range",
  "passive, stage",
  "other",
] as const;

export const loudspeakerInputSchema = z.strictObject({
  maker: z.string().trim().min(1, "Enter the maker.").max(120),
  model: z.string().trim().min(1, "Enter the model.").max(120),
  serial: z.string().trim().max(80).default(""),
  kind: z.enum(LOUDSPEAKER_KINDS),
  largest_dimension_m: z.number().min(0.02).max(5).nullable().default(null),
  tuning_Hz: z.number().min(5).max(500).nullable().default(null),
});
export type LoudspeakerInput = z.infer<typeof loudspeakerInputSchema>;

/** What is left out stays as it is: hence no defaults here. */
export const loudspeakerChangeSchema = z
  .strictObject({
    ...loudspeakerInputSchema.shape,
    serial: loudspeakerInputSchema.shape.serial.unwrap(),
    largest_dimension_m: loudspeakerInputSchema.shape.largest_dimension_m.unwrap(),
    tuning_Hz: loudspeakerInputSchema.shape.tuning_Hz.unwrap(),
  })
  .partial();
export type LoudspeakerChange = z.infer<typeof loudspeakerChangeSchema>;

export const loudspeakerSchema = z.object({
  id: idSchema,
  maker: z.string(),
  model: z.string(),
  serial: z.string(),
  kind: z.enum(LOUDSPEAKER_KINDS),
  largest_dimension_m: z.number().nullable(),
  tuning_Hz: z.number().nullable(),
  photo_url: z.string().nullable(),
  series_count: z.number().int(),
  created_at: timeSchema,
  created_by: personSchema.nullable(),
  changed_at: timeSchema,
});
export type Loudspeaker = z.infer<typeof loudspeakerSchema>;

const params = z.strictObject({ loudspeakerId: idSchema });

export const listLoudspeakers = defineOperation({
  id: "listLoudspeakers",
  method: "GET",
  path: "/api/v1/loudspeakers",
  summary: "Loudspeakers of the lab",
  access: "see",
  query: z.strictObject({ search: z.string().max(120).default("") }),
  status: 200,
  answer: z.object({ loudspeakers: z.array(loudspeakerSchema) }),
  errors: ["request.invalid"],
});

export const createLoudspeaker = defineOperation({
  id: "createLoudspeaker",
  method: "POST",
  path: "/api/v1/loudspeakers",
  summary: "Enter a loudspeaker",
  access: "capture",
  body: loudspeakerInputSchema,
  status: 201,
  answer: loudspeakerSchema,
  errors: ["request.invalid"],
});

export const getLoudspeaker = defineOperation({
  id: "getLoudspeaker",
  method: "GET",
  path: "/api/v1/loudspeakers/{loudspeakerId}",
  summary: "One loudspeaker",
  access: "see",
  params,
  status: 200,
  answer: loudspeakerSchema,
  errors: ["not-found"],
});

export const updateLoudspeaker = defineOperation({
  id: "updateLoudspeaker",
  method: "PATCH",
  path: "/api/v1/loudspeakers/{loudspeakerId}",
  summary: "Change a loudspeaker's particulars",
  access: "capture",
  params,
  body: loudspeakerChangeSchema,
  status: 200,
  answer: loudspeakerSchema,
  errors: ["not-found", "request.invalid"],
});

/** The body is the picture itself: JPEG, PNG or WebP, up to 8 MB. */
export const putLoudspeakerPhoto = defineOperation({
  id: "putLoudspeakerPhoto",
  method: "PUT",
  path: "/api/v1/loudspeakers/{loudspeakerId}/photo",
  summary: "Set the photo",
  access: "capture",
  params,
  bodyMediaType: "image/*",
  status: 200,
  answer: loudspeakerSchema,
  errors: ["not-found", "photo.not-image", "upload.too-large", "storage.full"],
});

export const getLoudspeakerPhoto = defineOperation({
  id: "getLoudspeakerPhoto",
  method: "GET",
  path: "/api/v1/loudspeakers/{loudspeakerId}/photo",
  summary: "The photo",
  access: "see",
  params,
  status: 200,
  answerMediaType: "image/*",
  errors: ["not-found", "storage.missing"],
});

export const loudspeakerOperations = [
  listLoudspeakers,
  createLoudspeaker,
  getLoudspeaker,
  updateLoudspeaker,
  putLoudspeakerPhoto,
  getLoudspeakerPhoto,
] as const;
