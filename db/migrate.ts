/** Brings a database up to date, or back. Runs as the migrator in the role of the owner. */
import { Kysely, Migrator, PostgresDialect, type MigrationResultSet } from "kysely";
import { AppError } from "../lib/errors/app-error";
import { createPool } from "./client";
import { MIGRATIONS } from "./migrations/index";

/**
 * @param connectionString of tidemark_migrator, a member of tidemark_owner.
 * @returns names of the migrations that were run; empty where nothing was to be done.
 * @throws AppError "database.migration" with the name of the migration that failed.
 */
export function migrateToLatest(connectionString: string): Promise<string[]> {
  return withMigrator(connectionString, (migrator) => migrator.migrateToLatest());
}

/** Undoes the last `steps` migrations, all without a number. Takes the data with it. */
export function migrateDown(
  connectionString: string,
  steps = Object.keys(MIGRATIONS).length,
): Promise<string[]> {
  return withMigrator(connectionString, async (migrator) => {
    const results = [];
    for (let step = 0; step < steps; step += 1) {
      const set = await migrator.migrateDown();
      results.push(...(set.results ?? []));
      if (set.error !== undefined || set.results?.length === 0) return { ...set, results };
    }
    return { results };
  });
}

async function withMigrator(
  connectionString: string,
  act: (migrator: Migrator) => Promise<MigrationResultSet>,
): Promise<string[]> {
  const pool = createPool({
    connectionString,
    max: 2,
    applicationName: "tidemark migrate",
    role: "tidemark_owner",
  });
  const db = new Kysely<unknown>({ dialect: new PostgresDialect({ pool }) });
  try {
    const provider = { getMigrations: () => Promise.resolve({ ...MIGRATIONS }) };
    const { error, results = [] } = await act(new Migrator({ db, provider }));
    if (error !== undefined) {
      const failed = results.find((result) => result.status === "Error")?.migrationName;
      const why = error instanceof Error ? error.message : JSON.stringify(error);
      throw new AppError(
        "database.migration",
        `The migration ${failed ?? "of the database"} failed: ${why}`,
        {
          cause: error,
        },
      );
    }
    return results.map((result) => result.migrationName);
  } finally {
    await db.destroy();
  }
}
