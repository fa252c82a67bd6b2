/** Founding a lab and inviting into it, without the web. */
import { randomUUID } from "node:crypto";
import { z } from "zod";
import { invite, toInvitationLink } from "../../app/_server/invitations";
import type { Db } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { recordEvent } from "../../db/queries/audit";
import { foundLab, listAllLabs } from "../../db/queries/labs";
import { emailSchema } from "../../lib/api/account";
import { timeZoneSchema } from "../../lib/api/labs";
import { rolesSchema } from "../../lib/api/members";
import { AppError } from "../../lib/errors/app-error";
import { toInputError } from "../../lib/http/problem";

export interface LabDatabases {
  /** In the role of the owner. */
  owner: Db;
  app: Db;
  /** Where the link leads. */
  publicUrl: string;
}

const slugSchema = z.string("--slug is missing.").regex(/^[a-z0-9]([a-z0-9-]{0,38}[a-z0-9])?$/, {
  error: "--slug is a short word of small letters, digits and -, such as fen-acoustics.",
});

const newLabSchema = z.object({
  slug: slugSchema,
  name: z.string("--name is missing.").trim().min(1).max(120),
  adminEmail: z.string("--admin-email is missing.").pipe(emailSchema),
  adminName: z.string().trim().max(120).default(""),
  timeZone: timeZoneSchema.default("UTC"),
});

const newInvitationSchema = z.object({
  slug: slugSchema,
  email: z.string("--email is missing.").pipe(emailSchema),
  name: z.string().trim().max(120).default(""),
  roles: z.array(z.string(), "--roles is missing.").pipe(rolesSchema),
});

/** What a terminal gives: every part may be missing or wrong. */
type Given<Schema extends z.ZodType> = Partial<Record<keyof z.input<Schema>, unknown>>;

/**
 * @returns the one-time link by which the first admin joins.
 * @throws AppError "request.invalid", "conflict.exists"
 */
export async function createLab(
  databases: LabDatabases,
  given: Given<typeof newLabSchema>,
): Promise<string> {
  const lab = parse(newLabSchema, given);
  const labId = randomUUID();
  await foundLab(databases.owner, { id: labId, ...lab });
  return sendInvitation(databases, labId, { email: lab.adminEmail, name: lab.adminName }, true);
}

/** @throws AppError "request.invalid", "not-found", "conflict.exists" for a member */
export async function inviteToLab(
  databases: LabDatabases,
  given: Given<typeof newInvitationSchema>,
): Promise<string> {
  const { slug, ...person } = parse(newInvitationSchema, given);
  const lab = (await listAllLabs(databases.owner)).find((one) => one.slug === slug);
  if (lab === undefined) throw new AppError("not-found", `There is no lab "${slug}".`);
  return sendInvitation(databases, lab.id, person, false);
}

async function sendInvitation(
  databases: LabDatabases,
  labId: string,
  person: { email: string; name: string; roles?: z.output<typeof rolesSchema> },
  founding: boolean,
): Promise<string> {
  const scope = { labId, accountId: null };
  const { secret } = await inLab(databases.app, scope, async (trx) => {
    if (founding) {
      await recordEvent(trx, scope, { act: "lab.created", subjectType: "lab", subjectId: labId });
    }
    return invite(trx, scope, { ...person, roles: person.roles ?? ["admin"] });
  });
  return toInvitationLink(databases.publicUrl, secret);
}

function parse<Schema extends z.ZodType>(schema: Schema, given: unknown): z.output<Schema> {
  try {
    return schema.parse(given);
  } catch (error) {
    throw toInputError(error);
  }
}
