/** A mail server on loopback that keeps what it received, and refuses where a test says so. */
import type { AddressInfo } from "node:net";
import { setTimeout as sleep } from "node:timers/promises";
import { callbackify } from "node:util";
import { simpleParser } from "mailparser";
import { SMTPServer } from "smtp-server";

export interface CaughtMail {
  to: string;
  from: string;
  subject: string;
  text: string;
  html: string;
  messageId: string;
}

export interface MailCatcher {
  url: string;
  /** In the order of their arrival. */
  mails: CaughtMail[];
  /** SMTP code that the address is answered with, as long as it stands here. */
  refusals: Map<string, number>;
  /** The newest mail to the address, once there is one. @param subject that it must have */
  waitFor: (to: string, subject?: string) => Promise<CaughtMail>;
  close: () => Promise<void>;
}

const WITHIN_MS = 20_000;

export async function openMailCatcher(): Promise<MailCatcher> {
  const mails: CaughtMail[] = [];
  const refusals = new Map<string, number>();
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS"],
    onRcptTo: ({ address }, _session, done) => {
      const code = refusals.get(address);
      done(
        code === undefined
          ? null
          : Object.assign(new Error("not taken here"), { responseCode: code }),
      );
    },
    onData: (stream, session, done) => {
      const to = session.envelope.rcptTo.map(({ address }) => address).join(", ");
      const keep = async (): Promise<void> => {
        const mail = await simpleParser(stream);
        mails.push({
          to,
          from: mail.from?.text ?? "",
          subject: mail.subject ?? "",
          text: mail.text ?? "",
          html: mail.html === false ? "" : (mail.html ?? ""),
          messageId: mail.messageId ?? "",
        });
      };
      callbackify(keep)(done);
    },
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const { port } = server.server.address() as AddressInfo;
  return {
    url: `smtp://127.0.0.1:${port}`,
    mails,
    refusals,
    waitFor: async (to, subject) => {
      const until = Date.now() + WITHIN_MS;
      for (;;) {
        const found = mails.findLast(
          (mail) => mail.to === to && (subject === undefined || mail.subject === subject),
        );
        if (found !== undefined) return found;
        if (Date.now() > until) {
          const seen = mails.map((mail) => `${mail.to}: ${mail.subject}`).join("\n");
          throw new Error(`no mail to ${to} came; there were:\n${seen}`);
        }
        await sleep(50);
      }
    },
    close: () => new Promise((resolve) => server.close(resolve)),
  };
}
