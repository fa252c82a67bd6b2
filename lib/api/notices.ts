/** Which notices one gets by mail, in the lab that one works in. */
import { z } from "zod";
import { NOTICE_KINDS } from "../mail/notices";
import { defineOperation } from "./operation";

export const noticeChoicesSchema = z.object({
  /** Those that reach one's present roles. */
  notices: z.array(z.object({ kind: z.enum(NOTICE_KINDS), wanted: z.boolean() })),
});
export type NoticeChoices = z.infer<typeof noticeChoicesSchema>;

export const getNoticeChoices = defineOperation({
  id: "getNoticeChoices",
  method: "GET",
  path: "/api/v1/account/notices",
  summary: "Notices by mail that reach one's roles, and which of them one wants",
  access: "see",
  status: 200,
  answer: noticeChoicesSchema,
  errors: [],
});

export const chooseNotice = defineOperation({
  id: "chooseNotice",
  method: "PATCH",
  path: "/api/v1/account/notices",
  summary: "Want a notice, or do without it",
  access: "see",
  body: z.strictObject({ kind: z.enum(NOTICE_KINDS), wanted: z.boolean() }),
  status: 200,
  answer: noticeChoicesSchema,
  errors: ["request.invalid"],
});

export const noticeOperations = [getNoticeChoices, chooseNotice] as const;
