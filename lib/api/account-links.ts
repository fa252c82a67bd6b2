/** What goes by mail to an account's address and comes back as a one-time link. */
import { z } from "zod";
import { emailSchema, newPasswordSchema } from "./account";
import { defineOperation } from "./operation";

/** It travels in the body, so that no log holds it. */
const secretSchema = z.string().min(20).max(100);

/** The answer is the same, and as late, whether an account has the address or not. */
export const requestPasswordReset = defineOperation({
  id: "requestPasswordReset",
  method: "POST",
  path: "/api/v1/password-resets",
  summary: "Mail a link by which a new password can be set, if an account has the address",
  access: "anyone",
  body: z.strictObject({ email: emailSchema }),
  status: 202,
  errors: ["request.invalid", "auth.rate-limited"],
});

export const resetPassword = defineOperation({
  id: "resetPassword",
  method: "POST",
  path: "/api/v1/password-resets/use",
  summary: "Set a new password by a mailed link; every session ends",
  access: "anyone",
  body: z.strictObject({ secret: secretSchema, password: newPasswordSchema }),
  status: 200,
  /** Sign in with this address next. */
  answer: z.object({ email: z.string() }),
  errors: ["request.invalid", "link.invalid", "password.weak"],
});

export const accountLinkSchema = z.object({
  purpose: z.enum(["reset-password", "change-address"]),
  /** The address that is signed in with now. */
  email: z.string(),
  new_address: z.string().nullable(),
});
export type OpenAccountLink = z.infer<typeof accountLinkSchema>;

export const lookAtAccountLink = defineOperation({
  id: "lookAtAccountLink",
  method: "POST",
  path: "/api/v1/account-links/look",
  summary: "What a mailed link is for; it stays unused",
  access: "anyone",
  body: z.strictObject({ secret: secretSchema }),
  status: 200,
  answer: accountLinkSchema,
  errors: ["request.invalid", "link.invalid"],
});

export const requestAddressChange = defineOperation({
  id: "requestAddressChange",
  method: "POST",
  path: "/api/v1/account/address",
  summary: "Mail a link to a new address, by which it is confirmed",
  access: "account",
  body: z.strictObject({ email: emailSchema, password: z.string().min(1).max(1000) }),
  status: 202,
  errors: ["request.invalid", "auth.wrong", "auth.rate-limited", "auth.session-needed"],
});

export const confirmAddress = defineOperation({
  id: "confirmAddress",
  method: "POST",
  path: "/api/v1/account-links/confirm-address",
  summary: "Confirm a new address by a mailed link",
  access: "anyone",
  body: z.strictObject({ secret: secretSchema }),
  status: 200,
  /** Signed in with from now on. */
  answer: z.object({ email: z.string() }),
  errors: ["request.invalid", "link.invalid", "conflict.exists"],
});

export const accountLinkOperations = [
  requestPasswordReset,
  resetPassword,
  lookAtAccountLink,
  requestAddressChange,
  confirmAddress,
] as const;
