/** Days of a history, newest first, in the lab's time zone. */
import type { HistoryEvent } from "@/lib/api/series";
import { toClock, toLongDay } from "@/lib/time/time-words";

export interface HistoryDay<Event> {
  /** "12 May 2026" */
  day: string;
  events: { event: Event; time: string }[];
}

export function toHistoryDays<Event extends { at: string }>(
  events: readonly Event[],
  timeZone: string,
): HistoryDay<Event>[] {
  const days: HistoryDay<Event>[] = [];
  for (const event of events) {
    const day = toLongDay(event.at, timeZone);
    const time = toClock(event.at, timeZone);
    const last = days.at(-1);
    if (last?.day === day) last.events.push({ event, time });
    else days.push({ day, events: [{ event, time }] });
  }
  return days;
}

/** "Ines Varley", "Ines Varley, by token bench", "Tidemark" where a worker did it. */
export function toWhoWords(event: Pick<HistoryEvent, "who" | "by_token">): string {
  const who = event.who?.name ?? "Tidemark";
  return event.by_token === null ? who : `${who}, by token ${event.by_token}`;
}
