import { describe, expect, it } from "vitest";
import type { HistoryEvent } from "@/lib/api/series";
import { toHistoryDays, toWhoWords } from "./history-words";

const event = (change: Partial<HistoryEvent>): HistoryEvent => ({
  id: "1",
  at: "2026-05-12T09:40:00.000Z",
  who: { id: "5f0c2b8e-0000-4000-8000-000000000009", name: "Ines Varley" },
  by_token: null,
  act: "run.uploaded",
  words: "uploaded osier5a_91_short.wav",
  reason: null,
  ...change,
});

describe("toHistoryDays", () => {
  it("gathers events by the day of the lab's time zone", () => {
    const events = [
      event({ id: "3", at: "2026-05-12T22:30:00.000Z" }),
      event({ id: "2", at: "2026-05-12T21:30:00.000Z" }),
    ];
    const toShape = (zone: string) =>
      toHistoryDays(events, zone).map((d) => [d.day, ...d.events.map((e) => e.time)]);
    expect(toShape("UTC")).toEqual([["12 May 2026", "22:30", "21:30"]]);
    expect(toShape("Europe/Berlin")).toEqual([
      ["13 May 2026", "00:30"],
      ["12 May 2026", "23:30"],
    ]);
  });
});

describe("toWhoWords", () => {
  it.each([
    [event({}), "Ines Varley"],
    [event({ by_token: "bench" }), "Ines Varley, by token bench"],
    [event({ who: null }), "Tidemark"],
  ])("%#", (given, expected) => {
    expect(toWhoWords(given)).toBe(expected);
  });
});
