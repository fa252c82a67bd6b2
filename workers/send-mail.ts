/** The job that sends one mail: take it from the outbox, compose, hand over, write down how it went. */
import type { Logger } from "pino";
import type { Db, Trx } from "../db/client";
import { asAccount, inLab } from "../db/in-lab";
import {
  claimMail,
  giveUpMail,
  markSent,
  postponeMail,
  type MailOwner,
  type MailRow,
} from "../db/queries/mails";
import { findRoles } from "../db/queries/members";
import { sendMailPayloadSchema } from "../lib/jobs/send-mail";
import { composeMail } from "../lib/mail/compose";
import { isRefusedForGood, toPauseS } from "../lib/mail/delivery";
import type { ComposedMail } from "../lib/mail/letter";
import { mailContentSchema, toExpiry, type MailContent } from "../lib/mail/mail-schema";
import { NOTICE_KINDS } from "../lib/mail/notices";

export interface OutgoingMail extends ComposedMail {
  from: string;
  to: string;
  messageId: string;
}

export interface MailTools {
  db: Db;
  log: Logger;
  publicUrl: string;
  from: string;
  /** Resolves once the mail server has taken it. */
  deliver: (mail: OutgoingMail) => Promise<void>;
}

/** Longer than any delivery takes: a worker that died gives its mails back after it. */
const LEASE_S = 120;

export async function sendMailJob(tools: MailTools, data: unknown): Promise<void> {
  const { mailId, ...owner } = sendMailPayloadSchema.parse(data);
  const inOwner = <T>(act: (trx: Trx) => Promise<T>): Promise<T> => asOwner(tools.db, owner, act);
  const taken = await inOwner(async (trx) => {
    const mail = await claimMail(trx, mailId, LEASE_S);
    return mail === null ? null : { mail, unwanted: await whyUnwanted(trx, mail) };
  });
  if (taken === null) return;
  const { mail, unwanted } = taken;
  const about = { mailId, kind: mail.kind, attempt: mail.attempts };
  if (unwanted !== null) {
    await inOwner((trx) => giveUpMail(trx, mailId, unwanted));
    tools.log.info({ ...about, why: unwanted }, "a mail is not sent");
    return;
  }
  try {
    await tools.deliver(toOutgoing(tools, mail));
  } catch (error) {
    const why = toReason(error);
    const pauseS = isRefusedForGood(error) ? null : toPauseS(mail.attempts);
    await inOwner((trx) =>
      pauseS === null ? giveUpMail(trx, mailId, why) : postponeMail(trx, mailId, { pauseS, why }),
    );
    tools.log.warn({ ...about, why, pauseS }, "a mail was not taken");
    return;
  }
  await inOwner((trx) => markSent(trx, mailId));
  tools.log.info(about, "a mail is sent");
}

function asOwner<T>(db: Db, { labId, accountId }: MailOwner, act: (trx: Trx) => Promise<T>) {
  if (labId !== null) return inLab(db, { labId, accountId: null }, act);
  if (accountId !== null) return asAccount(db, accountId, act);
  throw new Error("a mail belongs to a lab or to an account");
}

const contentOf = (mail: MailRow): MailContent =>
  mailContentSchema.parse({ ...mail.payload, kind: mail.kind });

/** @returns null where it should go out. */
async function whyUnwanted(trx: Trx, mail: MailRow): Promise<string | null> {
  const parsed = mailContentSchema.safeParse({ ...mail.payload, kind: mail.kind });
  if (!parsed.success) return `its contents do not fit: ${parsed.error.issues[0]?.message ?? ""}`;
  const expiry = toExpiry(parsed.data);
  if (expiry !== null && expiry <= new Date()) return "its link has expired";
  const { kind, lab_id: labId, account_id: accountId } = mail;
  if (labId !== null && accountId !== null && NOTICE_KINDS.some((one) => one === kind)) {
    const roles = await findRoles(trx, labId, accountId);
    if (roles.length === 0) return "its reader is no member of the lab any more";
  }
  return null;
}

function toOutgoing({ from, publicUrl }: MailTools, mail: MailRow): OutgoingMail {
  return {
    ...composeMail(contentOf(mail), { publicUrl }),
    from,
    to: mail.to_address,
    // The same at each attempt, so that a mail that came twice is known for one.
    messageId: `<${mail.id}@${new URL(publicUrl).hostname}>`,
  };
}

const toReason = (error: unknown): string =>
  (error instanceof Error ? error.message : String(error)).slice(0, 300);
