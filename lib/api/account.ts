import { z } from "zod";
import { THEMES } from "../labs/settings-schema";
import { idSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";
import { sessionViewSchema } from "./session";

export const nameSchema = z.string().trim().min(1, "Enter a name.").max(120);
export const emailSchema = z
  .email("Enter an address such as name@lab.example.")
  .max(254)
  .transform((email) => email.toLowerCase());
/** The rule itself stands in lib/account/passwords and is told with a figure. */
export const newPasswordSchema = z.string().min(1, "Enter a password.").max(1000);

export const accountSessionSchema = z.object({
  id: idSchema,
  created_at: timeSchema,
  last_seen_at: timeSchema,
  user_agent: z.string(),
  ip: z.string(),
  /** Whether it is the one that asks. */
  current: z.boolean(),
});
export type AccountSession = z.infer<typeof accountSessionSchema>;

export const updateAccount = defineOperation({
  id: "updateAccount",
  method: "PATCH",
  path: "/api/v1/account",
  summary: "Change name or theme",
  access: "account",
  body: z.strictObject({ name: nameSchema.optional(), theme: z.enum(THEMES).optional() }),
  status: 200,
  answer: sessionViewSchema,
  errors: ["request.invalid", "auth.session-needed"],
});

/** Every other session ends. */
export const changePassword = defineOperation({
  id: "changePassword",
  method: "PUT",
  path: "/api/v1/account/password",
  summary: "Change the password; every other session ends",
  access: "account",
  body: z.strictObject({ current: z.string().min(1).max(1000), next: newPasswordSchema }),
  status: 200,
  answer: z.object({ ended_sessions: z.number().int() }),
  errors: [
    "request.invalid",
    "auth.wrong",
    "auth.rate-limited",
    "password.weak",
    "auth.session-needed",
  ],
});

export const listSessions = defineOperation({
  id: "listSessions",
  method: "GET",
  path: "/api/v1/account/sessions",
  summary: "Where the account is signed in",
  access: "account",
  status: 200,
  answer: z.object({ sessions: z.array(accountSessionSchema) }),
  errors: ["auth.session-needed"],
});

export const endSession = defineOperation({
  id: "endSession",
  method: "DELETE",
  path: "/api/v1/account/sessions/{sessionId}",
  summary: "Sign out one session",
  access: "account",
  params: z.strictObject({ sessionId: idSchema }),
  status: 204,
  errors: ["not-found", "auth.session-needed"],
});

export const accountOperations = [updateAccount, changePassword, listSessions, endSession] as const;
