/** What the local mailbox keeps: each mail as it came, a file of its own, the newest of them. */
import { randomBytes } from "node:crypto";
import { mkdir, readdir, readFile, rm, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { simpleParser, type ParsedMail } from "mailparser";
import { hasErrorCode } from "../../lib/errors/has-error-code";

const MOST_KEPT = 200;
/** Milliseconds since 1970 and a random tail: names in the order of their arrival. */
const FILE_NAME = /^(\d{13}-[0-9a-f]{8})\.eml$/;
const MAIL_ID = /^\d{13}-[0-9a-f]{8}$/;

export interface KeptMail {
  id: string;
  at: Date;
  to: string;
  from: string;
  subject: string;
  text: string;
  html: string;
}

export interface KeptMails {
  keep: (source: Buffer) => Promise<void>;
  /** Newest first. */
  list: () => Promise<KeptMail[]>;
  /** null where there is none (any more). */
  find: (id: string) => Promise<KeptMail | null>;
}

/** @param folder made where it is missing, for its owner alone: links in it open accounts */
export async function openKeptMails(folder: string): Promise<KeptMails> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  const listIds = async (): Promise<string[]> =>
    (await readdir(folder))
      .flatMap((name) => FILE_NAME.exec(name)?.[1] ?? [])
      .toSorted()
      .toReversed();
  const find = async (id: string): Promise<KeptMail | null> => {
    if (!MAIL_ID.test(id)) return null;
    try {
      return toKept(id, await simpleParser(await readFile(join(folder, `${id}.eml`))));
    } catch (error) {
      if (hasErrorCode(error, "ENOENT")) return null;
      throw error;
    }
  };
  return {
    find,
    keep: async (source) => {
      const id = `${Date.now()}-${randomBytes(4).toString("hex")}`;
      await writeFile(join(folder, `${id}.eml`), source, { mode: 0o600 });
      for (const old of (await listIds()).slice(MOST_KEPT)) {
        await rm(join(folder, `${old}.eml`), { force: true });
      }
    },
    list: async () =>
      (await Promise.all((await listIds()).map(find))).filter((one) => one !== null),
  };
}

function toKept(id: string, mail: ParsedMail): KeptMail {
  const to = Array.isArray(mail.to) ? mail.to : mail.to === undefined ? [] : [mail.to];
  return {
    id,
    at: new Date(Number(id.slice(0, 13))),
    to: to.map(({ text }) => text).join(", "),
    from: mail.from?.text ?? "",
    subject: mail.subject ?? "",
    text: mail.text ?? "",
    html: mail.html === false ? "" : (mail.html ?? ""),
  };
}
