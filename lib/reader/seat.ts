/**
 * The reader's seat: level there, how long it may last, and whether the loudspeaker is enough.
 * Levels round up at the ear, limits and times round down.
 */
import { formatNumber, NBSP, roundLevelUp, roundLimitDown } from "../charts/format";
import { toListenerNotice, type HearingNotice } from "../exposure/notices";
import { computeAllowedS, DAY_RULES, WEEK_RULES } from "../exposure/rules";
import { computeSeatLevelDbA, type RoomKind } from "../exposure/seat-level";
import { toTimeText } from "../exposure/words";
import type { PartOfSound } from "./parts-of-sound";
import type { Units } from "./units";

/** What the reader tells of room and habit. */
export interface ReaderSeat {
  distanceM: number;
  pair: boolean;
  room: RoomKind;
  turnedDownDb: number;
  minutesPerDay: number;
  allowance: "week" | "niosh";
  /** What a meter showed at the seat; then distance, room and turning down do not count. */
  measuredDbA: number | null;
  /** How loud the reader usually listens, at the seat. */
  usualDbA: number;
  /** Peaks of the music over its mean level. */
  crestDb: number;
  /** How distances are said. */
  units: Units;
}

/** What the page shows before anybody has told anything, and to readers without script. */
export const USUAL_SEAT: ReaderSeat = {
  distanceM: 3,
  pair: true,
  room: "live",
  turnedDownDb: 6,
  minutesPerDay: 45,
  allowance: "week",
  measuredDbA: null,
  usualDbA: 80,
  crestDb: 20,
  units: "m",
};

/** What the page knows of the loudspeaker. */
export interface SeatSource {
  /** Estimate for music within the limit, one loudspeaker at 1 m; null where there is none. */
  musicDbA: number | null;
  /** Peaks over the mean level in that estimate. */
  musicCrestDb: number;
  atLeast: boolean;
  parts: readonly Pick<PartOfSound, "name" | "reachedDb" | "atLeast" | "belowLowest">[];
}

const SHORTEST_PRINTED_S = 15 * 60;

/** At the seat, dB(A), rounded up; null where neither an estimate nor a measured level is there. */
export function toSeatLevelDbA(source: SeatSource, seat: ReaderSeat): number | null {
  if (seat.measuredDbA !== null) return roundLevelUp(seat.measuredDbA);
  if (source.musicDbA === null) return null;
  return roundLevelUp(
    computeSeatLevelDbA({
      levelAt1mDbA: source.musicDbA,
      turnedDownDb: seat.turnedDownDb,
      distanceM: seat.distanceM,
      room: seat.room,
      pair: seat.pair,
    }),
  );
}

export interface SeatAnswer {
  levelDbA: number;
  /** "Estimated level at your seat: about 89 dB(A)." */
  level: string;
  /** How long it may last. */
  time: string;
  caveat: string;
  notice: HearingNotice | null;
}

export function toSeatAnswer(source: SeatSource, seat: ReaderSeat): SeatAnswer | null {
  const levelDbA = toSeatLevelDbA(source, seat);
  if (levelDbA === null) return null;
  const measured = seat.measuredDbA !== null;
  const more = source.atLeast && !measured ? " It can play louder; then the time is shorter." : "";
  return {
    levelDbA,
    level: measured
      ? `Measured at your seat: ${levelDbA}${NBSP}dB(A).`
      : `Estimated level at your seat: about ${levelDbA}${NBSP}dB(A).`,
    time: seat.allowance === "week" ? toWeekWords(levelDbA) : toDayWords(levelDbA),
    caveat: `${
      seat.allowance === "week"
        ? "This must also cover work, traffic, headphones and concerts."
        : "This must cover everything else that is loud that day."
    } An estimate, not a promise of safety, and not medical advice.${more}`,
    notice: toListenerNotice({ levelDbA, minutesPerDay: seat.minutesPerDay }),
  };
}

function toWeekWords(levelDbA: number): string {
  const weekS = computeAllowedS(levelDbA, WEEK_RULES.adult);
  if (weekS < SHORTEST_PRINTED_S) return "Not without hearing protection.";
  const sensitiveS = computeAllowedS(levelDbA, WEEK_RULES.sensitive);
  const sensitive =
    sensitiveS < SHORTEST_PRINTED_S
      ? "sensitive listeners: not without hearing protection"
      : `sensitive listeners ${toTimeText(sensitiveS / 7)}`;
  return `The week\u2019s listening allowance is used up in ${toTimeText(weekS)}: ${toTimeText(weekS / 7)} a day (${sensitive}).`;
}

function toDayWords(levelDbA: number): string {
  const dayS = computeAllowedS(levelDbA, DAY_RULES.niosh);
  return dayS < SHORTEST_PRINTED_S
    ? "Not without hearing protection."
    : `A working day\u2019s allowance (NIOSH) is used up in ${toTimeText(dayS)}.`;
}

/** The peak of a sine lies so far over its level. */
const SINE_PEAK_DB = 3;
/** Less to spare than this is "just". */
const JUST_DB = 3;

export interface EnoughRow {
  part: string;
  verdict:
    | "enough"
    | "just"
    | "at least enough"
    | "falls short"
    | "not tested so far"
    | "not known";
  words: string;
}

/** Peak that each loudspeaker must give at 1 m for the reader's usual level, dB. */
export function toNeededPeakDb(seat: ReaderSeat): number {
  const lostDb = computeSeatLevelDbA({
    levelAt1mDbA: 0,
    turnedDownDb: 0,
    distanceM: seat.distanceM,
    room: seat.room,
    pair: seat.pair,
  });
  return seat.usualDbA + seat.crestDb - lostDb;
}

/** Peaks of the reader's music against what each part of the sound can give. */
export function toEnoughRows(source: SeatSource, seat: ReaderSeat): EnoughRow[] {
  const needed = toNeededPeakDb(seat);
  return source.parts.map((part) => {
    const { name } = part;
    if (part.belowLowest) {
      return { part: name, verdict: "falls short", words: "past its limit from the start" };
    }
    if (part.reachedDb === null) {
      return { part: name, verdict: "not known", words: "not known: it was not assessed" };
    }
    const spare = roundLimitDown(part.reachedDb) + SINE_PEAK_DB - needed;
    if (spare >= 0 && part.atLeast) {
      return { part: name, verdict: "at least enough", words: "at least enough" };
    }
    if (spare >= JUST_DB) return { part: name, verdict: "enough", words: "enough" };
    if (spare >= 0) return { part: name, verdict: "just", words: "just enough" };
    const short = `${formatNumber(Math.ceil(-spare - 1e-9), 0)}${NBSP}dB`;
    return part.atLeast
      ? {
          part: name,
          verdict: "not tested so far",
          words: `not known: tested to ${short} under what this needs`,
        }
      : { part: name, verdict: "falls short", words: `falls short by ${short}` };
  });
}
