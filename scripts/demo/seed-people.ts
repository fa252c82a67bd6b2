/** The demo labs and their members, each made where it is missing. */
import { randomUUID } from "node:crypto";
import type { Db } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { createAccount } from "../../db/queries/accounts";
import { recordEvent } from "../../db/queries/audit";
import { foundLab, listAllLabs } from "../../db/queries/labs";
import { addMember, findMemberByEmail } from "../../db/queries/members";
import type { Role } from "../../lib/roles/roles";
import type { DemoLab, DemoMember } from "./demo-labs";

export interface SeededLab {
  labId: string;
  /** The member who records and uploads. */
  testerId: string;
  /** Decides and signs off: somebody else than the tester. */
  analystId: string;
  /** Publishes. */
  reviewerId: string;
}

/**
 * @param databases `owner` in the role of the owner: the web cannot found a lab.
 * @param passwordHash of every member.
 */
export async function ensureLab(
  databases: { owner: Db; app: Db },
  lab: DemoLab,
  passwordHash: string,
): Promise<SeededLab> {
  const found = (await listAllLabs(databases.owner)).find(({ slug }) => slug === lab.slug);
  const labId = found?.id ?? (await createDemoLab(databases, lab));
  const ids = new Map<DemoMember, string>();
  for (const member of lab.members) {
    ids.set(member, await ensureMember(databases.app, labId, member, passwordHash));
  }
  const idOf = (role: Role, except?: DemoMember): string => {
    const member = lab.members.find((one) => one !== except && one.roles.includes(role));
    const id = member && ids.get(member);
    if (id === undefined) throw new Error(`${lab.name} has no ${role}.`);
    return id;
  };
  const tester = lab.members.find(({ roles }) => roles.includes("tester"));
  return {
    labId,
    testerId: idOf("tester"),
    analystId: idOf("analyst", tester),
    reviewerId: idOf("reviewer"),
  };
}

async function createDemoLab(databases: { owner: Db; app: Db }, lab: DemoLab): Promise<string> {
  const id = randomUUID();
  await foundLab(databases.owner, { id, slug: lab.slug, name: lab.name, timeZone: lab.timeZone });
  const scope = { labId: id, accountId: null };
  await inLab(databases.app, scope, (trx) =>
    recordEvent(trx, scope, { act: "lab.created", subjectType: "lab", subjectId: id }),
  );
  return id;
}

async function ensureMember(
  app: Db,
  labId: string,
  { email, name, roles }: DemoMember,
  passwordHash: string,
): Promise<string> {
  const scope = { labId, accountId: randomUUID() };
  return inLab(app, scope, async (trx) => {
    const member = await findMemberByEmail(trx, labId, email);
    if (member !== null) return member.accountId;
    const { accountId } = scope;
    await createAccount(trx, { id: accountId, email, name, passwordHash });
    await addMember(trx, { labId, accountId, roles });
    await recordEvent(trx, scope, {
      act: "member.joined",
      subjectType: "account",
      subjectId: accountId,
      details: { email, roles },
    });
    return accountId;
  });
}
