/** Every kind of mail and what its template needs: what stands in the outbox, as JSON. */
import { z } from "zod";
import { ROLES } from "../roles/roles";

const words = z.string();
/** Of a one-time link; taken out of the row as soon as the mail is gone. */
const secret = z.string().min(20);
const time = z.iso.datetime();

/** Which series of which lab a notice is about. */
const aboutSeries = {
  lab: words,
  /** IANA name; moments are told in it. */
  time_zone: words,
  series_id: z.uuid(),
  /** "S-0231" */
  series: words,
  /** Maker and model. */
  loudspeaker: words,
};

export const mailContentSchema = z.discriminatedUnion("kind", [
  z.strictObject({
    kind: z.literal("invitation"),
    invitation_id: z.uuid(),
    lab: words,
    time_zone: words,
    name: words,
    invited_by: words.nullable(),
    roles: z.array(z.enum(ROLES)),
    expires_at: time,
    secret,
  }),
  z.strictObject({ kind: z.literal("password-reset"), name: words, expires_at: time, secret }),
  z.strictObject({
    kind: z.literal("address-change"),
    name: words,
    old_address: words,
    expires_at: time,
    secret,
  }),
  /** To the old address, once the new one is confirmed. */
  z.strictObject({ kind: z.literal("address-changed"), name: words, new_address: words }),
  /** To an address that somebody wanted for an account while another account has it. */
  z.strictObject({ kind: z.literal("address-taken") }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("analysis-failed"),
    version: z.number().int(),
    message: words,
    remedy: words,
    file: words.nullable(),
    report: words,
  }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("ready-for-review"),
    version: z.number().int(),
  }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("run-asked"),
    by: words,
    /** Of the run in the plan. */
    label: words,
    level_dB: z.number(),
    reason: words,
  }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("signed-off"),
    by: words,
    version: z.number().int(),
    criterion: words,
  }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("reopened"),
    by: words,
    version: z.number().int(),
    reason: words,
  }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("published"),
    by: words,
    revision: z.number().int(),
    /** Path of the page, on our host. */
    path: words,
    change_note: words.nullable(),
    embargo_until: time.nullable(),
  }),
  z.strictObject({
    ...aboutSeries,
    kind: z.literal("maker-comment"),
    from: words,
    comment: words,
  }),
]);
export type MailContent = z.infer<typeof mailContentSchema>;
export type MailKind = MailContent["kind"];
export type ContentOf<Kind extends MailKind> = Extract<MailContent, { kind: Kind }>;

/** When its link stops working; null for a mail without one. A mail that is later is not sent. */
export const toExpiry = (content: MailContent): Date | null =>
  "expires_at" in content ? new Date(content.expires_at) : null;
