/**
 * Moments in words, in the time zone of the lab: "today 10:42", "11 May", "11 May 2025". Months are
 * spelled here, not by the platform, whose short forms differ between server and browser.
 */

const MONTHS = [
  "January",
  "February",
  "March",
  "April",
  "May",
  "June",
  "July",
  "August",
  "September",
  "October",
  "November",
  "December",
] as const;
const SHORT = 3;
const DAY_MS = 86_400_000;

/** Where no lab is chosen there is no zone of a lab. */
export const NO_LAB_ZONE = "UTC";

interface Calendar {
  year: number;
  /** 0 to 11 */
  month: number;
  day: number;
  /** "10:42" */
  clock: string;
  /** Whole days since 1970-01-01, of the calendar in that zone. */
  dayNumber: number;
}

/** A formatter takes longer to make than to use; there are as many as there are zones in use. */
const formatters = new Map<string, Intl.DateTimeFormat>();

function formatterOf(timeZone: string): Intl.DateTimeFormat {
  const known = formatters.get(timeZone);
  if (known !== undefined) return known;
  const made = new Intl.DateTimeFormat("en-GB", {
    timeZone,
    year: "numeric",
    month: "numeric",
    day: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    hourCycle: "h23",
  });
  formatters.set(timeZone, made);
  return made;
}

function toCalendar(at: Date, timeZone: string): Calendar {
  const parts = new Map(
    formatterOf(timeZone)
      .formatToParts(at)
      .map((p) => [p.type, p.value]),
  );
  const [year, month, day] = (["year", "month", "day"] as const).map((name) =>
    Number(parts.get(name)),
  ) as [number, number, number];
  return {
    year,
    month: month - 1,
    day,
    clock: `${parts.get("hour") ?? ""}:${parts.get("minute") ?? ""}`,
    dayNumber: Math.round(Date.UTC(year, month - 1, day) / DAY_MS),
  };
}

const monthOf = ({ month }: Calendar): string => MONTHS[month] ?? "";
const shortDay = (calendar: Calendar): string =>
  `${calendar.day} ${monthOf(calendar).slice(0, SHORT)}`;

/**
 * @param at ISO 8601, or a date
 * @param timeZone IANA name, such as "Europe/Helsinki"
 * @returns "10:42"
 */
export const toClock = (at: string | Date, timeZone: string): string =>
  toCalendar(new Date(at), timeZone).clock;

/** @returns "12 May 2026" with the month in full: the heading of a day. */
export function toLongDay(at: string | Date, timeZone: string): string {
  const calendar = toCalendar(new Date(at), timeZone);
  return `${calendar.day} ${monthOf(calendar)} ${calendar.year}`;
}

/**
 * @param now null where it is not known (a page drawn on the server): then the year is said always.
 * @returns "11 May", with the year where it is another: "11 May 2025"
 */
export function toDay(at: string | Date, now: Date | null, timeZone: string): string {
  const calendar = toCalendar(new Date(at), timeZone);
  const sameYear = now !== null && toCalendar(now, timeZone).year === calendar.year;
  return sameYear ? shortDay(calendar) : `${shortDay(calendar)} ${calendar.year}`;
}

/** @returns "today 10:42", "yesterday 10:42", "tomorrow 10:42", else the day as `toDay` says it. */
export function toMoment(at: string | Date, now: Date | null, timeZone: string): string {
  if (now === null) return toDay(at, null, timeZone);
  const then = toCalendar(new Date(at), timeZone);
  const away = then.dayNumber - toCalendar(now, timeZone).dayNumber;
  const near = { "-1": "yesterday", "0": "today", "1": "tomorrow" }[String(away)];
  return near === undefined ? toDay(at, now, timeZone) : `${near} ${then.clock}`;
}

/** @returns the name as given where it is a time zone, else null. */
export function parseTimeZone(name: string): string | null {
  try {
    const known = new Intl.DateTimeFormat("en-GB", { timeZone: name }).resolvedOptions();
    return name === "" || known.timeZone === "" ? null : name;
  } catch {
    return null;
  }
}
