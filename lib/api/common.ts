/** Shapes that several answers share. */
import * as z from "zod";

export const idSchema = z.uuid();
export const timeSchema = z.iso.datetime();

export const personSchema = z.object({ id: idSchema, name: z.string() });
export type Person = z.infer<typeof personSchema>;

/** RFC 9457, plus our stable code, the request's id and the faults by field. */
export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  instance: z.string(),
  code: z.string(),
  requestId: z.string(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  details: z.record(z.string(), z.unknown()).optional(),
});
export type Problem = z.infer<typeof problemSchema>;

export const pageQuery = {
  page: z.coerce.number().int().min(1).max(100_000).default(1),
  page_size: z.coerce.number().int().min(1).max(100).default(25),
};

/** A reason that a person gives for an act that needs one. */
export const reasonSchema = z.string().trim().min(3, "Give a reason.").max(500);
