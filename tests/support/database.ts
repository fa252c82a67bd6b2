/**
 * A database of its own for each suite, copied from the migrated template:
 *
 *     let database: TestDatabase;
 *     beforeAll(async () => { database = await createTestDatabase(); });
 *     afterAll(() => database.drop());
 */
import { randomBytes } from "node:crypto";
import { inject } from "vitest";
import { type DatabaseRole, type Secrets } from "../../lib/config/secrets";
import { toConnectionString } from "../../lib/config/environment";
import { dropDatabase, ensureDatabase } from "../../scripts/setup/database";
import { TEMPLATE_DATABASE } from "./test-cluster";

export interface TestDatabase {
  databaseName: string;
  databasePort: number;
  secrets: Secrets;
  /** Connection string of a role: superuser, owner, migrator, app or queue. */
  connectionString: (role: DatabaseRole) => string;
  /** Ends every connection and takes the database away. */
  drop: () => Promise<void>;
}

/** @param template the migrated one, or "template0" for an empty database */
export async function createTestDatabase(
  template: typeof TEMPLATE_DATABASE | "template0" = TEMPLATE_DATABASE,
): Promise<TestDatabase> {
  const access = {
    ...inject("cluster"),
    databaseName: `test_${randomBytes(6).toString("hex")}`,
  };
  await ensureDatabase(access, access.databaseName, template);
  return {
    ...access,
    connectionString: (role) => toConnectionString(access, role),
    drop: () => dropDatabase(access, access.databaseName),
  };
}
