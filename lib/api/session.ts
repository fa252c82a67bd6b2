import { z } from "zod";
import { labSettingsSchema, THEMES } from "../labs/settings-schema";
import { ROLES } from "../roles/roles";
import { idSchema } from "./common";
import { defineOperation } from "./operation";

export const labChoiceSchema = z.object({
  id: idSchema,
  slug: z.string(),
  name: z.string(),
  roles: z.array(z.enum(ROLES)),
});
export type LabChoice = z.infer<typeof labChoiceSchema>;

export const sessionViewSchema = z.object({
  account: z.object({
    id: idSchema,
    email: z.string(),
    name: z.string(),
    theme: z.enum(THEMES),
  }),
  /** The lab that is worked in; null where the account is in none. */
  lab: z
    .object({
      id: idSchema,
      slug: z.string(),
      name: z.string(),
      time_zone: z.string(),
      settings: labSettingsSchema,
    })
    .nullable(),
  /** Roles in that lab, now. */
  roles: z.array(z.enum(ROLES)),
  /** Every lab of the account. */
  labs: z.array(labChoiceSchema),
  via: z.enum(["session", "token"]),
});
export type SessionView = z.infer<typeof sessionViewSchema>;

export const getSession = defineOperation({
  id: "getSession",
  method: "GET",
  path: "/api/v1/session",
  summary: "Who is calling, in which lab, with which roles",
  access: "account",
  status: 200,
  answer: sessionViewSchema,
  errors: [],
});

export const switchLab = defineOperation({
  id: "switchLab",
  method: "PUT",
  path: "/api/v1/session/lab",
  summary: "Work in another lab of the account",
  access: "account",
  body: z.strictObject({ lab_id: idSchema }),
  status: 200,
  answer: sessionViewSchema,
  errors: ["request.invalid", "not-found", "auth.session-needed"],
});

export const sessionOperations = [getSession, switchLab] as const;
