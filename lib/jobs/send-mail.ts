/** The job that sends one mail of the outbox. Ids only: the row is the truth. */
import { z } from "zod";
import type { JobQueue } from "./job-queue";

export const SEND_MAIL = "send-mail";

export const sendMailPayloadSchema = z.strictObject({
  labId: z.uuid().nullable(),
  accountId: z.uuid().nullable(),
  mailId: z.uuid(),
});
export type SendMailPayload = z.infer<typeof sendMailPayloadSchema>;

/** Asking again while the job waits changes nothing. */
export async function enqueueSendMail(
  queue: { mails: JobQueue<SendMailPayload> },
  payload: SendMailPayload,
): Promise<void> {
  const parsed = sendMailPayloadSchema.parse(payload);
  await queue.mails.add(SEND_MAIL, parsed, { jobId: `mail-${parsed.mailId}` });
}
