/** The post: looks into the outbox every few seconds and has what is due sent over SMTP. */
import nodemailer from "nodemailer";
import type { Logger } from "pino";
import type { Db } from "../db/client";
import { findDueMails } from "../db/queries/mails";
import { toConnectionString, type Environment } from "../lib/config/environment";
import { openMailQueue, WorkerOnPostgres } from "../lib/jobs/queues";
import { enqueueSendMail, SEND_MAIL } from "../lib/jobs/send-mail";
import { parseSmtpUrl } from "../lib/mail/delivery";
import { repeat } from "./repeat";
import { sendMailJob, type MailTools, type OutgoingMail } from "./send-mail";

const OUTBOX_LOOK_MS = 2000;
const AT_ONCE = 2;
const CONNECT_WITHIN_MS = 10_000;
const SILENT_FOR_MS = 20_000;
/** Longer than a delivery may take. */
const LOCK_MS = 60_000;

export interface Post {
  /** Takes up nothing more. */
  stop: () => void;
  /** What is under way is finished. */
  close: () => Promise<void>;
}

/**
 * @param lookMs between two looks into the outbox.
 * @returns null without a mail server: then mails wait in the outbox.
 */
export async function openPost(
  environment: Environment,
  db: Db,
  log: Logger,
  lookMs = OUTBOX_LOOK_MS,
): Promise<Post | null> {
  if (environment.smtpUrl === null) {
    log.info("no mail server is set: mails wait in the outbox");
    return null;
  }
  const queueConnection = toConnectionString(environment, "queue");
  const onError = (error: Error): void => log.warn({ err: error }, "the queue reports an error");
  const queue = await openMailQueue(queueConnection, onError);
  const { deliver, hangUp } = openTransport(environment.smtpUrl);
  const { publicUrl, mailFrom: from } = environment;
  const tools: MailTools = { db, log, publicUrl, from, deliver };
  const worker = new WorkerOnPostgres(SEND_MAIL, (job) => sendMailJob(tools, job.data), {
    connection: { connectionString: queueConnection, max: 1 },
    concurrency: AT_ONCE,
    lockDuration: LOCK_MS,
    removeOnComplete: { count: 0 },
    removeOnFail: { count: 0 },
  });
  worker.on("error", onError);
  worker.on("failed", (job, error) =>
    log.warn({ err: error, mailId: job?.id }, "a mail is taken up again later"),
  );
  await worker.waitUntilReady();
  const look = async (): Promise<void> => {
    for (const mail of await findDueMails(db)) await enqueueSendMail(queue, mail);
  };
  return {
    stop: repeat(lookMs, look, log),
    close: async () => {
      await worker.close();
      await queue.close();
      hangUp();
    },
  };
}

function openTransport(smtpUrl: string) {
  const transport = nodemailer.createTransport({
    ...parseSmtpUrl(smtpUrl),
    pool: true,
    maxConnections: AT_ONCE,
    connectionTimeout: CONNECT_WITHIN_MS,
    greetingTimeout: CONNECT_WITHIN_MS,
    socketTimeout: SILENT_FOR_MS,
    // Nothing of ours is read from a file or fetched.
    disableFileAccess: true,
    disableUrlAccess: true,
  });
  return {
    deliver: async (mail: OutgoingMail): Promise<void> => {
      await transport.sendMail({
        ...mail,
        // No answers by machines that are on holiday.
        headers: { "Auto-Submitted": "auto-generated", "X-Auto-Response-Suppress": "All" },
      });
    },
    hangUp: () => transport.close(),
  };
}
