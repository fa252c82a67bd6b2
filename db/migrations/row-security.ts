/** What every migration says about a table that belongs to a lab or an account: written once. */
import { sql, type Kysely } from "kysely";

/** The lab and account of the running transaction; null where none was set. */
export const CURRENT_LAB = "nullif(current_setting('tidemark.lab', true), '')::uuid";
export const CURRENT_ACCOUNT = "nullif(current_setting('tidemark.account', true), '')::uuid";

type Privilege = "select" | "insert" | "update" | "delete";

/** Row-level security that binds the owner of the table too. */
export async function enforceRowSecurity(db: Kysely<unknown>, table: string): Promise<void> {
  await sql
    .raw(
      `alter table ${table} enable row level security;
       alter table ${table} force row level security;`,
    )
    .execute(db);
}

/** Rows of the set lab and no others, for the application. */
export async function protectByLab(
  db: Kysely<unknown>,
  table: string,
  privileges: readonly Privilege[],
): Promise<void> {
  await enforceRowSecurity(db, table);
  await sql
    .raw(
      `create policy lab on ${table} for all to tidemark_app
         using (lab_id = ${CURRENT_LAB}) with check (lab_id = ${CURRENT_LAB});
       grant ${privileges.join(", ")} on ${table} to tidemark_app;`,
    )
    .execute(db);
}

/** Rows of the set account and no others, for the application. */
export async function protectByAccount(
  db: Kysely<unknown>,
  table: string,
  privileges: readonly Privilege[],
): Promise<void> {
  await enforceRowSecurity(db, table);
  await sql
    .raw(
      `create policy account on ${table} for all to tidemark_app
         using (account_id = ${CURRENT_ACCOUNT}) with check (account_id = ${CURRENT_ACCOUNT});
       grant ${privileges.join(", ")} on ${table} to tidemark_app;`,
    )
    .execute(db);
}
