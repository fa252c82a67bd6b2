/**
 * The hearing notices: when they stand, and in which words.
 * Signal words by ANSI Z535.4: CAUTION for what could injure mildly, WARNING for what could injure for good.
 */
import {
  computeAllowedS,
  EU_PEAK_DB_C,
  meetsVenueLimit,
  VENUE_LIMIT_DB_A,
  WEEK_RULES,
} from "./rules";
import type { SessionDose } from "./session-dose";
import { toLevelText, toTimeText, toWholeDoseText } from "./words";

export const NOTICE_SIGNALS = ["CAUTION", "WARNING"] as const;
export type NoticeSignal = (typeof NOTICE_SIGNALS)[number];

export interface HearingNotice {
  signal: NoticeSignal;
  /** The hazard, in bold: "102 dB(A) where you stand." */
  lead: string;
  /** Consequence and how to avoid it. */
  text: string;
}

const CAUTION_FROM_DB_A = 80;
const WARNING_FROM_DB_A = 100;
const SHORTEST_PRINTED_S = 15 * 60;

/** From 80 dB(A) CAUTION; from 100 dB(A), or over the day's allowance, WARNING; null below. */
export function toTesterSignal(
  session: Pick<SessionDose, "levelAtTesterDbA" | "dose">,
): NoticeSignal | null {
  if (session.levelAtTesterDbA >= WARNING_FROM_DB_A || session.dose > 1) return "WARNING";
  return session.levelAtTesterDbA >= CAUTION_FROM_DB_A ? "CAUTION" : null;
}

const TESTER_PLACE_WORDS = {
  "in-room": "at your place in the room",
  "next-room": "at your place in the next room",
  "outdoors-10m": "at your place 10\u00a0m away",
} as const;

/**
 * The notice on the plan and on the runs page of a series; null under 80 dB(A).
 * @param options.where "plan" says where the tester stands, "runs" also what the session adds up to
 * @param options.stage a loudspeaker for stages: peaks are said as well
 */
export function toTesterNotice(
  session: SessionDose,
  options: { where: "plan" | "runs"; stage?: boolean },
): HearingNotice | null {
  const signal = toTesterSignal(session);
  if (signal === null) return null;
  const level = toLevelText(session.levelAtTesterDbA, "dB(A)");
  const sentences: string[] = [];
  if (options.where === "runs") {
    sentences.push(`The planned session is ${toDoseWords(session)}.`);
  } else {
    if (session.levelAtTesterDbA >= WARNING_FROM_DB_A) {
      sentences.push("This level can damage hearing for good within minutes.");
    } else if (signal === "CAUTION") {
      sentences.push("Sound above 80\u00a0dB(A) adds up over the day and can damage hearing.");
    }
    if (session.dose > 1)
      sentences.push(
        `The planned session is ${toDoseWords(session)}: it can damage hearing for good.`,
      );
  }
  sentences.push(toAdvice(session, signal));
  if (options.stage) sentences.push(toPeakSentence(session.peakAtTesterDbC));
  return {
    signal,
    lead:
      options.where === "plan"
        ? `${level} where you stand.`
        : `${level} ${TESTER_PLACE_WORDS[session.tester]}.`,
    text: sentences.join(" "),
  };
}

function toDoseWords(session: SessionDose): string {
  return `${toWholeDoseText(session.dose)} of a day\u2019s dose (${session.ruleName}), repeats and conditioning counted`;
}

function toAdvice(session: SessionDose, signal: NoticeSignal): string {
  const from = session.leaveRoomFromDb;
  const away = session.tester === "in-room" ? "leave the room" : "stay away";
  const leave = from === null ? "" : `, ${away} from ${Math.round(from * 10) / 10}\u00a0dB up`;
  return signal === "WARNING"
    ? `Wear hearing protection${leave}, keep sweeps short.`
    : `Keep hearing protection at hand${leave}, keep sweeps short.`;
}

/** Peaks at the tester's place, against the peak action values of Directive 2003/10/EC. */
function toPeakSentence(peakDbC: number): string {
  const peak = toLevelText(peakDbC, "dB(C)");
  const over = (["limit", "upperAction", "lowerAction"] as const).find(
    (key) => peakDbC >= EU_PEAK_DB_C[key],
  );
  if (over === undefined) return `Peaks reach ${peak}.`;
  const name = {
    limit: "limit",
    upperAction: "upper action value",
    lowerAction: "lower action value",
  }[over];
  return `Peaks reach ${peak}, the EU ${name} for peaks is ${EU_PEAK_DB_C[over]}\u00a0dB(C): a single one can injure.`;
}

export interface MaxLevel {
  /** Highest level that stands in the view, SPL at `distanceM`, unweighted. */
  levelDb: number;
  distanceM: number;
  /** The limit itself was not reached. */
  atLeast?: boolean;
  /** The loudest run in the view, which need not be the most that the loudspeaker can do. */
  mayPlayLouder?: boolean;
  /** A loudspeaker for stages. */
  stage?: boolean;
}

export interface MaxLevelNotice extends HearingNotice {
  /** The method line that stands with every maximum level. */
  method: string;
}

/** How the figure came about; `criterion` in words, for example "limit: 10 % distortion or 3 dB compression". */
export function toMethodLine(criterion?: string): string {
  const method = "Sine sweep, one tone at a time, unweighted";
  return criterion === undefined
    ? `${method}; music differs.`
    : `${method}; ${criterion}; music differs.`;
}

/**
 * The slim line that stands in every view with a maximum level. The level counts as dB(A), the safe side.
 * Where the week's allowance (H.870) would last under 15 minutes no time is printed.
 * Under 80 dB it still stands, as CAUTION, and says what the allowance is.
 */
export function toMaxLevelNotice(max: MaxLevel): MaxLevelNotice {
  const level = toLevelText(max.levelDb, "dB", max.atLeast ? "down" : "up");
  const distance = `${Math.round(max.distanceM * 100) / 100}\u00a0m`;
  const allowedS = computeAllowedS(Math.ceil(max.levelDb - 1e-9), WEEK_RULES.adult);
  const warning = max.levelDb >= WARNING_FROM_DB_A || allowedS < SHORTEST_PRINTED_S;
  const hazard = toMaxLevelHazard(max, allowedS, warning);
  const venue =
    max.stage && !meetsVenueLimit(max.levelDb)
      ? ` Venues: at most ${VENUE_LIMIT_DB_A}\u00a0dB(A) over 15 minutes (WHO).`
      : "";
  return {
    signal: warning ? "WARNING" : "CAUTION",
    lead: `${max.atLeast ? "At least" : "Up to"} ${level} at ${distance}:`,
    text: `${hazard}${venue}`,
    method: toMethodLine(),
  };
}

function toMaxLevelHazard(max: MaxLevel, allowedS: number, warning: boolean): string {
  if (warning) return `not without hearing protection.${max.atLeast ? " It can play louder." : ""}`;
  const louder = max.atLeast
    ? " It can play louder; then the time is shorter."
    : max.mayPlayLouder
      ? " It may play louder; then the time is shorter."
      : "";
  return max.levelDb < CAUTION_FROM_DB_A
    ? `a week\u2019s listening allowance is 40\u00a0h at 80\u00a0dB(A).${louder}`
    : `the week\u2019s listening allowance is used up in ${toTimeText(allowedS)}.${louder}`;
}

/** What a reader's habit means for the week. */
export interface ListeningHabit {
  /** At the seat, dB(A). */
  levelDbA: number;
  /** A day, seven days a week. */
  minutesPerDay: number;
  sensitive?: boolean;
}

/**
 * CAUTION from half the week's allowance or 80 dB(A), WARNING from the whole or 100 dB(A); null below both.
 * The level counts rounded up.
 */
export function toListenerNotice(habit: ListeningHabit): HearingNotice | null {
  const levelDbA = Math.ceil(habit.levelDbA - 1e-9);
  const allowedS = computeAllowedS(
    levelDbA,
    habit.sensitive ? WEEK_RULES.sensitive : WEEK_RULES.adult,
  );
  const share = (habit.minutesPerDay * 60 * 7) / allowedS;
  const warning = share >= 1 || levelDbA >= WARNING_FROM_DB_A;
  if (!warning && share < 0.5 && levelDbA < CAUTION_FROM_DB_A) return null;
  const level = toLevelText(levelDbA, "dB(A)");
  if (allowedS < SHORTEST_PRINTED_S) {
    return {
      signal: "WARNING",
      lead: `${level} at your seat: not without hearing protection.`,
      text: "Listening this loud can damage hearing for good within minutes. Turn down.",
    };
  }
  const time = toTimeText(habit.minutesPerDay * 60);
  return {
    signal: warning ? "WARNING" : "CAUTION",
    lead: `${time} a day at ${level} is ${toWholeDoseText(share)} of a week\u2019s listening allowance.`,
    text: warning
      ? `Listening this loud for this long can damage hearing for good. Turn down, or listen less than ${toTimeText(allowedS / 7)} a day.`
      : "Sound above 80\u00a0dB(A) adds up over the week. Turned down by 3\u00a0dB the same time uses about half.",
  };
}
