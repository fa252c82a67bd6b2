/** Labs, people and tokens in a suite's own database, made by the product's own queries. */
import { randomUUID } from "node:crypto";
import { createDatabase, type Db } from "../../db/client";
import { inLab, type LabScope } from "../../db/in-lab";
import { createAccount } from "../../db/queries/accounts";
import { foundLab } from "../../db/queries/labs";
import { addMember } from "../../db/queries/members";
import { createToken } from "../../db/queries/tokens";
import { createSecret, digestSecret, TOKEN_PREFIX } from "../../lib/account/secrets";
import { hashPassword } from "../../lib/account/passwords";
import { ROLES, type Role } from "../../lib/roles/roles";
import type { TestDatabase } from "./database";

export interface LabBench {
  database: TestDatabase;
  /** As tidemark_app. */
  app: Db;
  /** As the migrator in the role of the owner. */
  owner: Db;
  close: () => Promise<void>;
}

export interface TestMember {
  scope: LabScope & { accountId: string };
  /** A token with the member's roles. */
  token: string;
}

export function openLabBench(database: TestDatabase): LabBench {
  const app = createDatabase({ connectionString: database.connectionString("app"), max: 3 });
  const owner = createDatabase({
    connectionString: database.connectionString("migrator"),
    role: "tidemark_owner",
    max: 2,
  });
  return {
    database,
    app,
    owner,
    close: async () => {
      await app.destroy();
      await owner.destroy();
    },
  };
}

/** Of every member made here. */
export const TEST_PASSWORD = "a password for tests alone";

/** @returns the lab and a member with every role. */
export async function makeTestLab(
  bench: LabBench,
  slug: string,
): Promise<{ labId: string; all: TestMember }> {
  const labId = randomUUID();
  await foundLab(bench.owner, { id: labId, slug, name: `Lab ${slug}` });
  return { labId, all: await makeTestMember(bench, labId, "all", [...ROLES]) };
}

export async function makeTestMember(
  bench: LabBench,
  labId: string,
  name: string,
  roles: Role[],
): Promise<TestMember> {
  const accountId = randomUUID();
  const scope = { labId, accountId };
  const token = `${TOKEN_PREFIX}${createSecret()}`;
  const passwordHash = await hashPassword(TEST_PASSWORD);
  await inLab(bench.app, scope, async (trx) => {
    await createAccount(trx, {
      id: accountId,
      email: `${name}.${accountId.slice(0, 8)}@lab.test`,
      name,
      passwordHash,
    });
    await addMember(trx, { labId, accountId, roles });
    await createToken(trx, {
      labId,
      accountId,
      name: `${name}'s script`,
      tokenHash: digestSecret(token),
      prefix: token.slice(0, 8),
      roles,
      expiresAt: null,
    });
  });
  return { scope, token };
}
