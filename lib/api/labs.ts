import { z } from "zod";
import { labSettingsSchema } from "../labs/settings-schema";
import { TRAIL_ABOUT } from "../labs/trail-about";
import { parseTimeZone } from "../time/time-words";
import { idSchema, pageQuery, personSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";

export const labSchema = z.object({
  id: idSchema,
  slug: z.string(),
  name: z.string(),
  time_zone: z.string(),
  settings: labSettingsSchema,
});
export type Lab = z.infer<typeof labSchema>;

export const timeZoneSchema = z
  .string()
  .max(60)
  .refine((name) => parseTimeZone(name) !== null, {
    error: "Enter a time zone such as Europe/Helsinki or UTC.",
  });

export const getLab = defineOperation({
  id: "getLab",
  method: "GET",
  path: "/api/v1/lab",
  summary: "Name, time zone and settings of the lab",
  access: "see",
  status: 200,
  answer: labSchema,
  errors: [],
});

export const updateLab = defineOperation({
  id: "updateLab",
  method: "PATCH",
  path: "/api/v1/lab",
  summary: "Change name, time zone or settings of the lab",
  access: "administer",
  body: z.strictObject({
    name: z.string().trim().min(1, "Enter a name.").max(120).optional(),
    time_zone: timeZoneSchema.optional(),
    /** Replaces all settings; what is left out takes its default. */
    settings: labSettingsSchema.optional(),
    /** What the caller saw before the change; refused where it is so no more. */
    was: labSchema.pick({ name: true, time_zone: true, settings: true }).optional(),
  }),
  status: 200,
  answer: labSchema,
  errors: ["request.invalid", "conflict.changed"],
});

export const trailEventSchema = z.object({
  id: z.number().int(),
  at: timeSchema,
  who: personSchema.nullable(),
  /** Name of the token, where a script did it. */
  by_token: z.string().nullable(),
  act: z.string(),
  subject_type: z.string(),
  subject_id: z.string(),
  series_id: idSchema.nullable(),
  details: z.record(z.string(), z.unknown()),
});
export type TrailEvent = z.infer<typeof trailEventSchema>;

export const listTrail = defineOperation({
  id: "listTrail",
  method: "GET",
  path: "/api/v1/trail",
  summary: "The lab-wide trail, newest first",
  access: "administer",
  query: z.strictObject({
    /** Events older than this one. */
    before: z.coerce.number().int().min(1).optional(),
    /** Only events of this kind. */
    about: z.enum(TRAIL_ABOUT).optional(),
    page_size: pageQuery.page_size,
  }),
  status: 200,
  answer: z.object({ events: z.array(trailEventSchema), more: z.boolean() }),
  errors: ["request.invalid"],
});

export const labOperations = [getLab, updateLab, listTrail] as const;
