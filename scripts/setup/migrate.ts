/** Brings our tables and those of the queue up to date. */
import { migrateQueue } from "../../db/migrate-queue";
import { migrateToLatest } from "../../db/migrate";
import { toConnectionString } from "../../lib/config/environment";
import { type ClusterAccess } from "./database";

/** @returns names of the migrations that were run */
export async function migrate(access: ClusterAccess): Promise<string[]> {
  const migrator = toConnectionString(access, "migrator");
  const names = await migrateToLatest(migrator);
  await migrateQueue({ migrator, queue: toConnectionString(access, "queue") });
  return names;
}
