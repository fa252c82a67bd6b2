import type { SessionView } from "../../lib/api/session";
import { AppError } from "../../lib/errors/app-error";
import { labSettingsSchema } from "../../lib/labs/settings-schema";
import { findAccount } from "../../db/queries/accounts";
import { getLab, listLabsOfAccount } from "../../db/queries/labs";
import { asAccount } from "../../db/in-lab";
import type { Db } from "../../db/client";
import type { Caller } from "./caller";

/** What frame and scripts need to know about the caller. */
export function getSessionView(db: Db, caller: Caller): Promise<SessionView> {
  return asAccount(db, caller.accountId, async (trx) => {
    const account = await findAccount(trx, caller.accountId);
    if (account === null) throw new AppError("auth.required", "Sign in again.");
    const lab = caller.labId === null ? null : await getLab(trx, caller.labId);
    const labs = await listLabsOfAccount(trx, caller.accountId);
    return {
      account: {
        id: account.id,
        email: account.email,
        name: account.name,
        theme: account.theme,
      },
      lab: lab === null ? null : { ...lab, settings: labSettingsSchema.parse(lab.settings) },
      roles: caller.roles,
      // A token belongs to one lab and shows no other.
      labs: caller.tokenId === null ? labs : labs.filter((choice) => choice.id === caller.labId),
      via: caller.tokenId === null ? "session" : "token",
    };
  });
}
