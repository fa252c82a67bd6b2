import { requireSession } from "@/app/_server/caller";
import { handle } from "@/app/_server/handle";
import { toToken } from "@/app/_server/views/people";
import { recordEvent } from "@/db/queries/audit";
import { createToken as createRow, getTokenRow, listTokens as listRows } from "@/db/queries/tokens";
import { createToken as createSecretToken, digestSecret } from "@/lib/account/secrets";
import { createToken, listTokens } from "@/lib/api/tokens";
import { AppError } from "@/lib/errors/app-error";
import { may } from "@/lib/roles/roles";

const DAY_MS = 86_400_000;

export const GET = handle(listTokens, ({ inLab, caller }) =>
  inLab(async (trx) => {
    const owner = may(caller.roles, "administer") ? undefined : caller.accountId;
    return { tokens: (await listRows(trx, caller.labId, owner)).map(toToken) };
  }),
);

export const POST = handle(createToken, async ({ inLab, caller, scope, body }) => {
  requireSession(caller);
  const missing = body.roles.filter((role) => !caller.roles.includes(role));
  if (missing.length > 0) {
    throw new AppError(
      "request.invalid",
      `roles: you do not hold ${missing.join(", ")} yourself, so a token of yours cannot.`,
      { details: { fields: [{ path: "roles", message: `Not yours: ${missing.join(", ")}.` }] } },
    );
  }
  const { token, prefix } = createSecretToken();
  const days = body.expires_in_days;
  const row = await inLab(async (trx) => {
    const id = await createRow(trx, {
      labId: caller.labId,
      accountId: caller.accountId,
      name: body.name,
      tokenHash: digestSecret(token),
      prefix,
      roles: body.roles,
      expiresAt: days === null ? null : new Date(Date.now() + days * DAY_MS),
    });
    await recordEvent(trx, scope, {
      act: "token.created",
      subjectType: "token",
      subjectId: id,
      details: { name: body.name, roles: body.roles },
    });
    return getTokenRow(trx, caller.labId, id);
  });
  return { token, row: toToken(row) };
});
