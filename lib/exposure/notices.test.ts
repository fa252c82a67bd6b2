import { describe, expect, it } from "vitest";
import { planSchema } from "../series/plan-schema";
import { toListenerNotice, toMaxLevelNotice, toTesterNotice, toTesterSignal } from "./notices";
import { computeSessionDose } from "./session-dose";

const NB = "\u00a0";
const session = (levels: number[], minutes = 10, tester: "in-room" | "next-room" = "in-room") =>
  computeSessionDose(
    planSchema.parse({
      levels: levels.map((level_dB) => ({ level_dB, long_term: level_dB === Math.max(...levels) })),
      place: { tester },
      conditioning: { minutes, crest_dB: 12, rms_re_sweep_dB: -9, gap_s: 0.5 },
    }),
    "niosh",
  );

describe("toTesterSignal", () => {
  it.each([
    [79.9, 0.01, null],
    [80, 0.01, "CAUTION"],
    [99.9, 1, "CAUTION"],
    [99.9, 1.01, "WARNING"],
    [100, 0.01, "WARNING"],
    [70, 1.2, "WARNING"],
  ] as const)("%d dB(A) and a dose of %d: %s", (levelAtTesterDbA, dose, signal) => {
    expect(toTesterSignal({ levelAtTesterDbA, dose })).toBe(signal);
  });
});

describe("toTesterNotice", () => {
  it("warns on the plan", () => {
    expect(toTesterNotice(session([76, 86, 96, 102]), { where: "plan" })).toEqual({
      signal: "WARNING",
      lead: `102${NB}dB(A) where you stand.`,
      text: `This level can damage hearing for good within minutes. Wear hearing protection, leave the room from 96${NB}dB up, keep sweeps short.`,
    });
  });

  it("adds up on the runs page", () => {
    const notice = toTesterNotice(session([76, 86, 96, 102]), { where: "runs" });
    expect(notice?.lead).toBe(`102${NB}dB(A) at your place in the room.`);
    expect(notice?.text).toContain(
      `18${NB}% of a day\u2019s dose (NIOSH), repeats and conditioning counted`,
    );
  });

  it("warns below 100 dB(A) where the session is over the day's allowance", () => {
    const long = session([76, 98], 240);
    expect(long.dose).toBeGreaterThan(1);
    const notice = toTesterNotice(long, { where: "plan" });
    expect(notice?.signal).toBe("WARNING");
    expect(notice?.text).toContain("% of a day\u2019s dose (NIOSH)");
  });

  it("is gentler from 80 and silent below", () => {
    expect(toTesterNotice(session([76, 102], 10, "next-room"), { where: "plan" })?.signal).toBe(
      "CAUTION",
    );
    expect(toTesterNotice(session([70, 76]), { where: "plan" })).toBeNull();
  });

  it("says the peaks of a stage loudspeaker, and the action value that they pass", () => {
    const quiet = toTesterNotice(session([76, 102]), { where: "plan", stage: true });
    expect(quiet?.text).toContain(`Peaks reach 106${NB}dB(C).`);
    const loud = toTesterNotice(session([100, 130]), { where: "plan", stage: true });
    expect(loud?.text).toContain(`Peaks reach 134${NB}dB(C).`);
    const louder = toTesterNotice(
      { ...session([100, 130]), peakAtTesterDbC: 137 },
      { where: "plan", stage: true },
    );
    expect(louder?.text).toContain(`the EU upper action value for peaks is 137${NB}dB(C)`);
  });
});

describe("toMaxLevelNotice", () => {
  it("gives no time where the week's allowance lasts under 15 minutes", () => {
    expect(toMaxLevelNotice({ levelDb: 103.4, distanceM: 1 })).toEqual({
      signal: "WARNING",
      lead: `Up to 104${NB}dB at 1${NB}m:`,
      text: "not without hearing protection.",
      method: "Sine sweep, one tone at a time, unweighted; music differs.",
    });
  });

  it("gives the week's time below 100 dB, rounded down at the level rounded up", () => {
    const notice = toMaxLevelNotice({ levelDb: 91.2, distanceM: 1 });
    expect(notice.lead).toBe(`Up to 92${NB}dB at 1${NB}m:`);
    // 40 h / 10^1.2 = 2.5238 h
    expect(notice.text).toBe(
      `the week\u2019s listening allowance is used up in 2${NB}h 31${NB}min.`,
    );
    expect(notice.signal).toBe("CAUTION");
  });

  it("says of an unreached limit that it can play louder, and rounds it down", () => {
    const notice = toMaxLevelNotice({ levelDb: 91.8, distanceM: 1, atLeast: true });
    expect(notice.lead).toBe(`At least 91${NB}dB at 1${NB}m:`);
    expect(notice.text).toContain("It can play louder; then the time is shorter.");
  });

  it("says of the loudest run that the loudspeaker may play louder, where a time is given", () => {
    const quiet = toMaxLevelNotice({ levelDb: 91.2, distanceM: 1, mayPlayLouder: true });
    expect(quiet.lead).toBe(`Up to 92${NB}dB at 1${NB}m:`);
    expect(quiet.text).toContain("It may play louder; then the time is shorter.");
    const loud = toMaxLevelNotice({ levelDb: 103, distanceM: 1, mayPlayLouder: true });
    expect(loud.text).toBe("not without hearing protection.");
  });

  it("names the venue limit for a stage loudspeaker", () => {
    expect(toMaxLevelNotice({ levelDb: 124, distanceM: 1, stage: true }).text).toContain(
      `at most 100${NB}dB(A)`,
    );
    expect(toMaxLevelNotice({ levelDb: 100, distanceM: 1, stage: true }).text).not.toContain(
      "Venues",
    );
  });

  it("never promises safety", () => {
    for (let levelDb = 60; levelDb < 130; levelDb += 1) {
      for (const atLeast of [true, false]) {
        const notice = toMaxLevelNotice({ levelDb, distanceM: 1, atLeast, stage: true });
        expect(`${notice.lead} ${notice.text}`).not.toMatch(/safe/i);
        expect(notice.method).toContain("music differs");
      }
    }
  });
});

describe("toListenerNotice", () => {
  it("says how much of the week's allowance a habit uses", () => {
    // 45 min a day at 89 dB(A): 315 of 302.1 min.
    expect(toListenerNotice({ levelDbA: 88.46, minutesPerDay: 45 })).toEqual({
      signal: "WARNING",
      lead: `45${NB}min a day at 89${NB}dB(A) is 105${NB}% of a week\u2019s listening allowance.`,
      text: `Listening this loud for this long can damage hearing for good. Turn down, or listen less than 43${NB}min a day.`,
    });
  });

  it("cautions from half the allowance or 80 dB(A)", () => {
    expect(toListenerNotice({ levelDbA: 86, minutesPerDay: 30 })?.signal).toBe("CAUTION");
    expect(toListenerNotice({ levelDbA: 79, minutesPerDay: 30 })).toBeNull();
    expect(toListenerNotice({ levelDbA: 79, minutesPerDay: 300 })?.signal).toBe("CAUTION");
    expect(toListenerNotice({ levelDbA: 79, minutesPerDay: 300, sensitive: true })?.signal).toBe(
      "WARNING",
    );
  });

  it("prints no time under 15 minutes a week", () => {
    const notice = toListenerNotice({ levelDbA: 103, minutesPerDay: 60 });
    expect(notice?.lead).toContain("not without hearing protection");
    expect(notice?.text).not.toMatch(/\d/);
  });
});
