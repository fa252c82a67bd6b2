import { z } from "zod";
import { ROLES } from "../roles/roles";
import { emailSchema, nameSchema, newPasswordSchema } from "./account";
import { idSchema, personSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";

export const rolesSchema = z
  .array(z.enum(ROLES))
  .min(1, "Choose at least one role.")
  .transform((roles) => ROLES.filter((role) => roles.includes(role)));

export const memberSchema = z.object({
  id: idSchema,
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(ROLES)),
  since: timeSchema,
});
export type Member = z.infer<typeof memberSchema>;

export const invitationSchema = z.object({
  id: idSchema,
  email: z.string(),
  name: z.string(),
  roles: z.array(z.enum(ROLES)),
  created_at: timeSchema,
  created_by: personSchema.nullable(),
  expires_at: timeSchema,
  /** How its mail fares; null where none was written. */
  mail: z
    .object({
      state: z.enum(["waiting", "sent", "not delivered"]),
      /** What the mail server said last, where it did not take it. */
      error: z.string().nullable(),
    })
    .nullable(),
});
export type Invitation = z.infer<typeof invitationSchema>;

const params = z.strictObject({ accountId: idSchema });

export const listMembers = defineOperation({
  id: "listMembers",
  method: "GET",
  path: "/api/v1/members",
  summary: "Members of the lab and their roles",
  access: "see",
  status: 200,
  answer: z.object({ members: z.array(memberSchema) }),
  errors: [],
});

export const setMemberRoles = defineOperation({
  id: "setMemberRoles",
  method: "PUT",
  path: "/api/v1/members/{accountId}/roles",
  summary: "Change a member's roles, with effect from the next request",
  access: "administer",
  params,
  body: z.strictObject({ roles: rolesSchema }),
  status: 200,
  answer: memberSchema,
  errors: ["not-found", "request.invalid", "member.last-admin"],
});

export const removeMember = defineOperation({
  id: "removeMember",
  method: "DELETE",
  path: "/api/v1/members/{accountId}",
  summary: "Remove a member; sessions and tokens lose the lab at once",
  access: "administer",
  params,
  status: 204,
  errors: ["not-found", "member.last-admin"],
});

export const listInvitations = defineOperation({
  id: "listInvitations",
  method: "GET",
  path: "/api/v1/invitations",
  summary: "Open invitations",
  access: "administer",
  status: 200,
  answer: z.object({ invitations: z.array(invitationSchema) }),
  errors: [],
});

export const createInvitation = defineOperation({
  id: "createInvitation",
  method: "POST",
  path: "/api/v1/invitations",
  summary: "Invite somebody; the one-time link is shown in this answer and never again",
  access: "administer",
  body: z.strictObject({
    email: emailSchema,
    name: z.string().trim().max(120).default(""),
    roles: rolesSchema,
  }),
  status: 201,
  answer: z.object({ invitation: invitationSchema, link: z.url() }),
  errors: ["request.invalid", "conflict.exists"],
});

export const withdrawInvitation = defineOperation({
  id: "withdrawInvitation",
  method: "DELETE",
  path: "/api/v1/invitations/{invitationId}",
  summary: "Withdraw an open invitation",
  access: "administer",
  params: z.strictObject({ invitationId: idSchema }),
  status: 204,
  errors: ["not-found"],
});

const secretSchema = z.string().min(20).max(100);

export const openInvitationSchema = z.object({
  lab: z.string(),
  email: z.string(),
  name: z.string(),
  roles: z.array(z.enum(ROLES)),
  /** Then the account's own password is asked for, not a new one. */
  account_exists: z.boolean(),
});
export type OpenInvitation = z.infer<typeof openInvitationSchema>;

/** The secret travels in the body, so that no log holds it. */
export const lookAtInvitation = defineOperation({
  id: "lookAtInvitation",
  method: "POST",
  path: "/api/v1/invitations/look",
  summary: "What an invitation link invites to",
  access: "anyone",
  body: z.strictObject({ secret: secretSchema }),
  status: 200,
  answer: openInvitationSchema,
  errors: ["request.invalid", "invitation.invalid"],
});

export const acceptInvitation = defineOperation({
  id: "acceptInvitation",
  method: "POST",
  path: "/api/v1/invitations/accept",
  summary: "Accept an invitation with a new account, or with the one that has the address",
  access: "anyone",
  body: z.strictObject({
    secret: secretSchema,
    /** Not needed where the account exists. */
    name: nameSchema.optional(),
    password: newPasswordSchema,
  }),
  status: 200,
  /** Sign in with this address next. */
  answer: z.object({ email: z.string(), lab: z.string() }),
  errors: [
    "request.invalid",
    "invitation.invalid",
    "password.weak",
    "auth.wrong",
    "auth.rate-limited",
    "conflict.exists",
  ],
});

export const memberOperations = [
  listMembers,
  setMemberRoles,
  removeMember,
  listInvitations,
  createInvitation,
  withdrawInvitation,
  lookAtInvitation,
  acceptInvitation,
] as const;
