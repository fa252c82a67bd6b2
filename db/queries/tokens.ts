/** API tokens for scripts. */
import { sql, type Selectable } from "kysely";
import { AppError } from "../../lib/errors/app-error";
import type { Role } from "../../lib/roles/roles";
import type { Db, Trx } from "../client";
import type { ApiTokensTable } from "../schema/api-tokens";

export type TokenRow = Selectable<ApiTokensTable> & { ownerName: string };

/** Ids behind a token that is neither revoked nor expired, of an account that is not disabled. */
export async function findToken(
  db: Db,
  tokenHash: string,
): Promise<{ tokenId: string; labId: string; accountId: string } | null> {
  const { rows } = await sql<{
    token_id: string;
    lab_id: string;
    account_id: string;
  }>`select token_id, lab_id, account_id from find_token(${tokenHash})`.execute(db);
  const row = rows[0];
  return row === undefined
    ? null
    : { tokenId: row.token_id, labId: row.lab_id, accountId: row.account_id };
}

export async function findTokenRoles(trx: Trx, labId: string, tokenId: string): Promise<Role[]> {
  const row = await trx
    .selectFrom("api_tokens")
    .select("roles")
    .where("lab_id", "=", labId)
    .where("id", "=", tokenId)
    .executeTakeFirst();
  return row?.roles ?? [];
}

/** Notes that the token is in use, once a minute at most. */
export async function touchToken(trx: Trx, labId: string, tokenId: string): Promise<void> {
  await trx
    .updateTable("api_tokens")
    .set({ last_used_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", tokenId)
    .where((eb) =>
      eb.or([
        eb("last_used_at", "is", null),
        eb("last_used_at", "<", sql<Date>`now() - interval '1 minute'`),
      ]),
    )
    .execute();
}

export async function createToken(
  trx: Trx,
  token: {
    labId: string;
    accountId: string;
    name: string;
    tokenHash: string;
    prefix: string;
    roles: Role[];
    expiresAt: Date | null;
  },
): Promise<string> {
  const row = await trx
    .insertInto("api_tokens")
    .values({
      lab_id: token.labId,
      account_id: token.accountId,
      name: token.name,
      token_hash: token.tokenHash,
      prefix: token.prefix,
      roles: token.roles,
      expires_at: token.expiresAt,
    })
    .returning("id")
    .executeTakeFirstOrThrow();
  return row.id;
}

/** Newest first; of one account where named. */
export async function listTokens(trx: Trx, labId: string, accountId?: string): Promise<TokenRow[]> {
  const tokens = tokensOf(trx, labId).orderBy("t.created_at", "desc");
  return (
    accountId === undefined ? tokens : tokens.where("t.account_id", "=", accountId)
  ).execute();
}

/** @throws AppError "not-found" */
export async function getTokenRow(trx: Trx, labId: string, tokenId: string): Promise<TokenRow> {
  const row = await tokensOf(trx, labId).where("t.id", "=", tokenId).executeTakeFirst();
  if (row === undefined) throw new AppError("not-found", "There is no such token.");
  return row;
}

export async function revokeToken(trx: Trx, labId: string, tokenId: string): Promise<void> {
  await trx
    .updateTable("api_tokens")
    .set({ revoked_at: new Date() })
    .where("lab_id", "=", labId)
    .where("id", "=", tokenId)
    .where("revoked_at", "is", null)
    .execute();
}

function tokensOf(trx: Trx, labId: string) {
  return trx
    .selectFrom("api_tokens as t")
    .innerJoin("accounts as a", "a.id", "t.account_id")
    .selectAll("t")
    .select("a.name as ownerName")
    .where("t.lab_id", "=", labId);
}
