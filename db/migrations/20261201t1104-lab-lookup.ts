/** The command line finds a lab by its slug: as the owner, who alone may found one. */
import { sql, type Kysely } from "kysely";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(`create policy lookup on labs for select to tidemark_owner using (true);`)
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql.raw(`drop policy lookup on labs;`).execute(db);
}
