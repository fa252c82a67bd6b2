import { describe, expect, it } from "vitest";
import { planSchema, type PlanInput } from "../series/plan-schema";
import { computeDose, DAY_RULES } from "./rules";
import { computeRunCost, computeSessionDose, toRunCostSentence } from "./session-dose";
import { toDoseText, toWholeDoseText } from "./words";

const toPlan = (input: PlanInput) => planSchema.parse(input);

const SIX_LEVELS = toPlan({
  levels: [76, 81, 86, 91, 96, 102].map((level_dB) => ({
    level_dB,
    repeats: 1,
    long_term: level_dB === 102,
  })),
});

describe("computeSessionDose", () => {
  it("counts sweeps with repeats, conditioning, long-term and closing, line by line", () => {
    const session = computeSessionDose(SIX_LEVELS, "niosh");
    expect(session.lines.map((l) => [l.kind, l.count, l.label, toDoseText(l.dose)])).toEqual([
      ["sweeps", 12, "12 sweeps, 76 to 102\u00a0dB, one repeat each", "5.32\u00a0%"],
      ["conditioning", 1, "10\u00a0min conditioning at 93\u00a0dB", "13.23\u00a0%"],
      ["long-term", 1, "long-term sweep at 102\u00a0dB", "1.95\u00a0%"],
      ["closing", 1, "closing repeat at 76\u00a0dB", "under 0.01\u00a0%"],
    ]);
    expect(toDoseText(session.dose)).toBe("20.50\u00a0%");
    expect(toWholeDoseText(session.dose)).toBe("21\u00a0%");
    expect(session.levelAtTesterDbA).toBe(102);
    expect(session.leaveRoomFromDb).toBe(96);
  });

  it("takes the peak of the sweep or of the conditioning, whichever is higher", () => {
    expect(computeSessionDose(SIX_LEVELS, "niosh").peakAtTesterDbC).toBeCloseTo(105.01, 2);
    const hotter = toPlan({
      ...SIX_LEVELS,
      conditioning: { minutes: 10, crest_dB: 15, rms_re_sweep_dB: -6, gap_s: 1 },
    });
    expect(computeSessionDose(hotter, "niosh").peakAtTesterDbC).toBeCloseTo(111, 9);
  });

  it("takes nothing off indoors whatever the distance, and 20 dB outdoors at 10 m", () => {
    for (const distance_m of [0.25, 1, 4]) {
      const plan = toPlan({ place: { distance_m, tester: "in-room" } });
      expect(computeSessionDose(plan, "niosh").levelAtTesterDbA).toBe(102);
    }
    const away = computeSessionDose(toPlan({ place: { tester: "outdoors-10m" } }), "niosh");
    expect(away.levelAtTesterDbA).toBe(82);
    expect(away.leaveRoomFromDb).toBeNull();
  });

  it("counts variants and uneven repeats, and says so", () => {
    const plan = toPlan({
      levels: [
        { level_dB: 76, repeats: 0 },
        { level_dB: 96, repeats: 2 },
      ],
      variants: [{ text: "port blocked", level_dB: 96 }],
      closing: false,
    });
    const session = computeSessionDose(plan, "eu");
    expect(session.lines).toHaveLength(1);
    expect(session.lines[0]?.label).toBe(
      "5 sweeps, 76 to 96\u00a0dB, 2 of them repeats, one variant",
    );
    const heard = [76, 96, 96, 96, 96].map((levelDbA) => ({
      levelDbA,
      durationS: plan.sweep.length_s,
    }));
    expect(session.dose).toBeCloseTo(computeDose(heard, DAY_RULES.eu), 12);
  });
});

describe("one further run", () => {
  const say = (levelDb: number, kind: "short-term" | "long-term", plan = SIX_LEVELS) =>
    toRunCostSentence(computeRunCost(plan, { levelDb, kind }, "niosh"), "niosh").replaceAll(
      "\u00a0",
      " ",
    );

  it("costs the sweep: 11.05 s of the 2 h that 91 dB(A) may last", () => {
    expect(say(91, "short-term")).toBe(
      "It takes 13 s, at 91 dB(A) where the tester stands: 0.16 % of the day\u2019s allowance (NIOSH).",
    );
  });

  it("costs its conditioning as well where it is long-term", () => {
    expect(say(102, "long-term")).toContain("It takes 10 min 14 s, at 102 dB(A)");
    const { dose } = computeRunCost(SIX_LEVELS, { levelDb: 102, kind: "long-term" }, "niosh");
    // The lines of the session above: 13.23 and 1.95 %.
    expect(dose).toBeCloseTo(0.1517, 3);
  });

  it("is heard through the door by who waits in the next room", () => {
    const outside = toPlan({ ...SIX_LEVELS, place: { tester: "next-room" } });
    expect(say(102, "short-term", outside)).toContain("at 82 dB(A) where the tester stands");
  });
});
