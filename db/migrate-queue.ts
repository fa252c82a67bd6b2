/** Brings the schema of the queue up to date. It belongs to tidemark_queue, which owns nothing else. */
import { runMigrations } from "bullmq";
import { sql, Kysely, PostgresDialect } from "kysely";
import { createPool } from "./client";

/**
 * The queue's own migrations ask for `create` on the database even where their schema exists; the
 * owner lends it for the length of the call.
 *
 * @param migrator connection string of tidemark_migrator.
 * @param queue connection string of tidemark_queue, same database.
 */
export async function migrateQueue(connections: {
  migrator: string;
  queue: string;
}): Promise<void> {
  const owner = new Kysely<unknown>({
    dialect: new PostgresDialect({
      pool: createPool({ connectionString: connections.migrator, max: 1, role: "tidemark_owner" }),
    }),
  });
  const queue = createPool({ connectionString: connections.queue, max: 1 });
  try {
    const name = await sql<{
      name: string;
    }>`select quote_ident(current_database()) as name`.execute(owner);
    const database = name.rows[0]?.name ?? "";
    await sql.raw(`grant create on database ${database} to tidemark_queue`).execute(owner);
    try {
      const client = await queue.connect();
      try {
        await runMigrations(client);
      } finally {
        client.release();
      }
    } finally {
      await sql.raw(`revoke create on database ${database} from tidemark_queue`).execute(owner);
    }
  } finally {
    await queue.end();
    await owner.destroy();
  }
}
