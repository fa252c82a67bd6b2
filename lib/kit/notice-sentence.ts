import type { HearingNotice } from "../exposure/notices";

/** "WARNING. At least 102 dB at 1 m: not without hearing protection." */
export const toNoticeSentence = (notice: HearingNotice): string =>
  `${notice.signal}. ${notice.lead} ${notice.text}`;
