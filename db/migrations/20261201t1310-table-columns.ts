/** A run may come as a table; where its head does not tell, a person says which column holds what. */
import { sql, type Kysely } from "kysely";

export async function up(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(`alter table uploads add column columns json; alter table runs add column columns json;`)
    .execute(db);
}

export async function down(db: Kysely<unknown>): Promise<void> {
  await sql
    .raw(`alter table runs drop column columns; alter table uploads drop column columns;`)
    .execute(db);
}
