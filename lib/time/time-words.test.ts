import { describe, expect, it } from "vitest";
import { parseTimeZone, toClock, toDay, toLongDay, toMoment } from "./time-words";

const now = new Date("2026-05-12T10:00:00Z");

describe("toMoment", () => {
  it.each([
    ["2026-05-12T08:42:00Z", "UTC", "today 08:42"],
    ["2026-05-12T08:42:00Z", "Europe/Berlin", "today 10:42"],
    ["2026-05-11T23:30:00Z", "UTC", "yesterday 23:30"],
    ["2026-05-11T23:30:00Z", "Europe/Berlin", "today 01:30"],
    ["2026-05-12T22:30:00Z", "Europe/Berlin", "tomorrow 00:30"],
    ["2026-05-06T12:00:00Z", "UTC", "6 May"],
    ["2026-05-14T12:00:00Z", "UTC", "14 May"],
    ["2025-05-06T12:00:00Z", "UTC", "6 May 2025"],
  ])("%s in %s", (at, zone, expected) => {
    expect(toMoment(at, now, zone)).toBe(expected);
  });

  it("counts days of the calendar, not of 24 hours, when the clock is put forward", () => {
    // 29 March 2026 has 23 hours in Berlin: 00:30 the day after is 23.5 h later.
    const after = new Date("2026-03-29T22:30:00Z");
    expect(toMoment("2026-03-28T23:00:00Z", after, "Europe/Berlin")).toBe("yesterday 00:00");
    expect(toMoment("2026-03-28T22:59:00Z", after, "Europe/Berlin")).toBe("28 Mar");
  });

  it("says a day with its year where the present is not known", () => {
    expect(toMoment("2026-05-12T08:42:00Z", null, "UTC")).toBe("12 May 2026");
  });
});

describe("toDay", () => {
  it("judges the year in the zone, not in UTC", () => {
    const newYear = new Date("2026-12-31T23:30:00Z");
    expect(toDay("2026-06-01T00:00:00Z", newYear, "UTC")).toBe("1 Jun");
    expect(toDay("2026-06-01T00:00:00Z", newYear, "Europe/Berlin")).toBe("1 Jun 2026");
  });

  it("cuts September like every other month", () => {
    expect(toDay("2026-09-05T12:00:00Z", now, "UTC")).toBe("5 Sep");
  });
});

describe("toClock and toLongDay", () => {
  it.each([
    ["2026-05-12T22:00:00Z", "Europe/Berlin", "13 May 2026", "00:00"],
    ["2026-01-01T04:29:00Z", "America/St_Johns", "1 January 2026", "00:59"],
    ["2026-01-31T13:15:00Z", "Asia/Kathmandu", "31 January 2026", "19:00"],
  ])("%s in %s", (at, zone, day, clock) => {
    expect([toLongDay(at, zone), toClock(at, zone)]).toEqual([day, clock]);
  });
});

it.each([
  ["Europe/Helsinki", "Europe/Helsinki"],
  ["UTC", "UTC"],
  ["Europe/Helsinky", null],
  ["", null],
])("parseTimeZone of %j", (name, expected) => {
  expect(parseTimeZone(name)).toBe(expected);
});
