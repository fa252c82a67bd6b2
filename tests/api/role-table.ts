/**
 * Who may do what, written by hand from the role table of the product text: one line per operation,
 * for a member of the own lab with one role each, for somebody with every role in another lab, and
 * for nobody. A route that is missing here fails the test.
 */
export type Verdict =
  /** Allowed: whatever the answer is, it is no refusal for want of rights. */
  | "yes"
  /** 403: known, but the roles do not reach. */
  | "no"
  /** 404: another lab's things are not there. */
  | "not there"
  /** 401: sign in first. */
  | "sign in";

export interface RoleRow {
  operation: string;
  tester: Verdict;
  analyst: Verdict;
  reviewer: Verdict;
  admin: Verdict;
  /** Every role, but in another lab, asking for our things. */
  otherLab: Verdict;
  nobody: Verdict;
}

const row = (
  operation: string,
  [tester, analyst, reviewer, admin]: readonly [Verdict, Verdict, Verdict, Verdict],
  otherLab: Verdict,
  nobody: Verdict = "sign in",
): RoleRow => ({ operation, tester, analyst, reviewer, admin, otherLab, nobody });

const EVERYONE = ["yes", "yes", "yes", "yes"] as const;
const TESTER_ANALYST = ["yes", "yes", "no", "no"] as const;
const ANALYST = ["no", "yes", "no", "no"] as const;
const REVIEWER = ["no", "no", "yes", "no"] as const;
const ADMIN = ["no", "no", "no", "yes"] as const;

export const ROLE_TABLE: readonly RoleRow[] = [
  // See everything in the lab, with the history of each series: all four roles.
  row("listLoudspeakers", EVERYONE, "yes"),
  row("getLoudspeaker", EVERYONE, "not there"),
  row("getLoudspeakerPhoto", EVERYONE, "not there"),
  row("listSeries", EVERYONE, "yes"),
  row("getSeries", EVERYONE, "not there"),
  row("getStimulus", EVERYONE, "not there"),
  row("getStimulusZip", EVERYONE, "not there"),
  row("getSeriesFolder", EVERYONE, "not there"),
  row("getSeriesHistory", EVERYONE, "not there"),
  row("listRuns", EVERYONE, "not there"),
  row("getRun", EVERYONE, "not there"),
  row("downloadRun", EVERYONE, "not there"),
  row("listAnalyses", EVERYONE, "not there"),
  row("getAnalysis", EVERYONE, "not there"),
  row("getResult", EVERYONE, "not there"),
  row("getReview", EVERYONE, "not there"),
  row("compareAnalyses", EVERYONE, "not there"),
  row("compareSeries", EVERYONE, "not there"),
  row("listEngineChanges", EVERYONE, "yes"),
  row("followAnalysis", EVERYONE, "not there"),
  row("followSeries", EVERYONE, "not there"),
  // Create loudspeakers and series, edit plan, upload, exclude a run with a reason: tester, analyst.
  row("createLoudspeaker", TESTER_ANALYST, "yes"),
  row("updateLoudspeaker", TESTER_ANALYST, "not there"),
  row("putLoudspeakerPhoto", TESTER_ANALYST, "not there"),
  row("createSeries", TESTER_ANALYST, "not there"),
  row("createSeriesFromFolder", TESTER_ANALYST, "yes"),
  row("updatePlan", TESTER_ANALYST, "not there"),
  row("removeSeries", TESTER_ANALYST, "not there"),
  row("restoreSeries", TESTER_ANALYST, "not there"),
  row("sendMicrophoneFile", TESTER_ANALYST, "yes"),
  row("actOnRun", TESTER_ANALYST, "not there"),
  row("removeRun", TESTER_ANALYST, "not there"),
  row("excuseSlot", TESTER_ANALYST, "not there"),
  row("createUpload", TESTER_ANALYST, "not there"),
  row("getUploadOffset", TESTER_ANALYST, "not there"),
  row("sendUploadBytes", TESTER_ANALYST, "not there"),
  row("stopUpload", TESTER_ANALYST, "not there"),
  // Start or repeat an analysis, change its settings: tester, analyst.
  row("startAnalysis", TESTER_ANALYST, "not there"),
  row("updateCriteria", TESTER_ANALYST, "not there"),
  // Decide a band's cause, comment, ask for a run, sign off, reopen: analyst.
  row("decideBands", ANALYST, "not there"),
  row("keepDecisions", ANALYST, "not there"),
  row("writeComment", ANALYST, "not there"),
  row("requestRun", ANALYST, "not there"),
  row("withdrawRunRequest", ANALYST, "not there"),
  row("signOff", ANALYST, "not there"),
  row("reopenSeries", ANALYST, "not there"),
  // Publish, correct, withdraw, preview links: reviewer.
  row("listPublications", EVERYONE, "not there"),
  row("getEvidence", EVERYONE, "not there"),
  row("draftPublication", EVERYONE, "not there"),
  row("getSummaryKit", EVERYONE, "not there"),
  row("listPreviews", EVERYONE, "not there"),
  row("publish", REVIEWER, "not there"),
  row("withdrawPublication", REVIEWER, "not there"),
  row("createPreview", REVIEWER, "not there"),
  row("revokePreview", REVIEWER, "not there"),
  row("answerMakerComment", REVIEWER, "not there"),
  // Members, roles, tokens of others, lab settings, the lab-wide trail: admin.
  row("getLab", EVERYONE, "yes"),
  row("listMembers", EVERYONE, "yes"),
  row("setMemberRoles", ADMIN, "not there"),
  row("removeMember", ADMIN, "not there"),
  row("listInvitations", ADMIN, "yes"),
  row("createInvitation", ADMIN, "yes"),
  row("withdrawInvitation", ADMIN, "not there"),
  row("updateLab", ADMIN, "yes"),
  row("listTrail", ADMIN, "yes"),
  row("getKeeping", ADMIN, "yes"),
  row("removeRecordings", ADMIN, "not there"),
  row("exportLab", ADMIN, "yes"),
  // Tokens: one's own for every member; those of others for the admin alone, and hidden from the rest.
  row("listTokens", EVERYONE, "yes"),
  row("createToken", EVERYONE, "yes"),
  row("revokeToken", ["not there", "not there", "not there", "yes"], "not there"),
  // One's own account, in whatever role.
  row("getSession", EVERYONE, "yes"),
  row("switchLab", EVERYONE, "not there"),
  row("updateAccount", EVERYONE, "yes"),
  row("changePassword", EVERYONE, "yes"),
  row("listSessions", EVERYONE, "yes"),
  row("requestAddressChange", EVERYONE, "yes"),
  // Notices of the lab that one works in.
  row("getNoticeChoices", EVERYONE, "yes"),
  row("chooseNotice", EVERYONE, "yes"),
  row("endSession", ["not there", "not there", "not there", "not there"], "not there"),
  // No account needed.
  row("lookAtInvitation", EVERYONE, "yes", "yes"),
  row("acceptInvitation", EVERYONE, "yes", "yes"),
  row("requestPasswordReset", EVERYONE, "yes", "yes"),
  row("resetPassword", EVERYONE, "yes", "yes"),
  row("lookAtAccountLink", EVERYONE, "yes", "yes"),
  row("confirmAddress", EVERYONE, "yes", "yes"),
  row("getHealth", EVERYONE, "yes", "yes"),
];
