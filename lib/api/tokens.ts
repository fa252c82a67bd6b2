import { z } from "zod";
import { ROLES } from "../roles/roles";
import { idSchema, personSchema, timeSchema } from "./common";
import { rolesSchema } from "./members";
import { defineOperation } from "./operation";

export const tokenSchema = z.object({
  id: idSchema,
  name: z.string(),
  /** The first characters, to tell it apart. */
  prefix: z.string(),
  owner: personSchema,
  /** As given; what counts is what its owner holds besides. */
  roles: z.array(z.enum(ROLES)),
  created_at: timeSchema,
  last_used_at: timeSchema.nullable(),
  expires_at: timeSchema.nullable(),
  revoked_at: timeSchema.nullable(),
});
export type Token = z.infer<typeof tokenSchema>;

export const listTokens = defineOperation({
  id: "listTokens",
  method: "GET",
  path: "/api/v1/tokens",
  summary: "Your tokens; for an admin those of the whole lab",
  access: "see",
  status: 200,
  answer: z.object({ tokens: z.array(tokenSchema) }),
  errors: [],
});

export const createToken = defineOperation({
  id: "createToken",
  method: "POST",
  path: "/api/v1/tokens",
  summary: "Make a token; it is shown in this answer and never again",
  access: "see",
  body: z.strictObject({
    name: z.string().trim().min(1, "Enter a name.").max(80),
    roles: rolesSchema,
    expires_in_days: z.number().int().min(1).max(3650).nullable().default(365),
  }),
  status: 201,
  answer: z.object({ token: z.string(), row: tokenSchema }),
  errors: ["request.invalid", "auth.session-needed"],
});

export const revokeToken = defineOperation({
  id: "revokeToken",
  method: "DELETE",
  path: "/api/v1/tokens/{tokenId}",
  summary: "Revoke a token of your own; an admin revokes any",
  access: "see",
  params: z.strictObject({ tokenId: idSchema }),
  status: 204,
  errors: ["not-found"],
});

export const tokenOperations = [listTokens, createToken, revokeToken] as const;
