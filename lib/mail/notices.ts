/** Notices: mails that members may do without. Who hears of what, unless they chose otherwise. */
import type { Role } from "../roles/roles";
import type { MailKind } from "./mail-schema";

export const NOTICE_KINDS = [
  "analysis-failed",
  "ready-for-review",
  "run-asked",
  "signed-off",
  "reopened",
  "published",
  "maker-comment",
] as const satisfies readonly MailKind[];
export type NoticeKind = (typeof NOTICE_KINDS)[number];

interface Notice {
  /** Whose work it touches. */
  roles: readonly Role[];
  /** For the account page: "an analysis failed". */
  words: string;
}

export const NOTICES: Readonly<Record<NoticeKind, Notice>> = {
  "analysis-failed": { roles: ["tester", "analyst"], words: "an analysis fails" },
  "ready-for-review": { roles: ["analyst"], words: "a series is ready for review" },
  "run-asked": { roles: ["tester"], words: "an analyst asks for another run" },
  "signed-off": { roles: ["reviewer"], words: "a series is signed off" },
  reopened: { roles: ["reviewer"], words: "a signed-off series is reopened" },
  published: { roles: ["tester", "analyst", "reviewer"], words: "a series is published" },
  "maker-comment": { roles: ["reviewer"], words: "a maker comments on a preview" },
};

/** Kinds that reach somebody with these roles. */
export const toNoticesOf = (roles: readonly Role[]): NoticeKind[] =>
  NOTICE_KINDS.filter((kind) => NOTICES[kind].roles.some((role) => roles.includes(role)));
