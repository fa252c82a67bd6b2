/** An account may change its address: the application writes it once the new one is confirmed. */
import { sql, type Kysely } from "kysely";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`grant update (email) on accounts to tidemark_app;`).execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`revoke update (email) on accounts from tidemark_app;`).execute(db);
}
