import { describe, expect, it } from "vitest";
import { toByteSource } from "../../audio/byte-source";
import { labSettingsSchema } from "../../labs/settings-schema";
import { planSchema } from "../../series/plan-schema";
import { toPlannedRuns } from "../../series/planned-runs";
import type { ArrivalReport } from "../arrival-schema";
import type { ArrivalRequest, ArrivalSibling } from "./arrival-request";
import { checkArrival } from "./check-arrival";
import { toVerdict } from "./verdict";

const plan = planSchema.parse({});
const planned = toPlannedRuns(plan, "fennel5");
const HZ = Array.from({ length: 241 }, (_, i) => 20 * 10 ** (i / 80));
const toText = (levelDb: number, thd?: (hz: number) => number, hz = HZ): string =>
  [
    `Hz,dB SPL${thd === undefined ? "" : ",THD %"}`,
    ...hz.map((f) => `${f},${levelDb}${thd === undefined ? "" : `,${thd(f)}`}`),
  ].join("\n");

const toRequest = (
  text: string,
  slot: string,
  siblings: ArrivalSibling[] = [],
  file = "run.csv",
): ArrivalRequest => ({
  run: {
    file,
    digest: "a".repeat(64),
    channel: 1,
    place: planned.find((run) => run.slot === slot) ?? null,
  },
  plan,
  limits: labSettingsSchema.parse({}).arrival,
  engineVersion: "1.0.0",
  siblings,
  open: () => toByteSource(new TextEncoder().encode(text)),
});
const speaking = (report: ArrivalReport) =>
  report.checks.filter((c) => c.verdict !== "pass").map((c) => [c.code, c.verdict, c.title]);

describe("a run that comes as a table", () => {
  it("has its level and its distortion, and says what is not known", async () => {
    const report = await checkArrival(
      toRequest(
        toText(76.2, () => 0.4),
        "short-76",
      ),
    );
    expect(speaking(report)).toEqual([]);
    expect(report.measured_level_dB).toBeCloseTo(76.2, 2);
    expect(report.checks.find((c) => c.code === "distortion-lowest")?.figure?.value).toBe(0.4);
    expect(report.checks[0]?.finding).toContain("noise, clipping and latency are not known");
    expect(toVerdict(report)).toBe("passed");
  });

  it("is held against the runs beside it", async () => {
    const first = await checkArrival(toRequest(toText(76), "short-76"));
    const sibling: ArrivalSibling = {
      file: "76.csv",
      digest: "b".repeat(64),
      channel: 1,
      place: planned.find((run) => run.slot === "short-76") ?? null,
      state: "passed",
      report: first,
    };
    const louder = await checkArrival(toRequest(toText(86.7), "short-86", [sibling]));
    expect(speaking(louder)).toContainEqual(["level-step", "fail", "level step off"]);
    const right = await checkArrival(toRequest(toText(86), "short-86", [sibling]));
    expect(speaking(right)).toEqual([]);
    const hot = toText(86, (hz) => (hz < 100 ? 45 : 1));
    const stopped = await checkArrival(toRequest(hot, "short-86", [sibling]));
    expect(speaking(stopped)).toEqual([["stop-rule", "warn", "do not go louder"]]);
  });

  it.each([
    ["another level", toText(66), "short-76", ["level-plan", "fail", "quieter than planned"]],
    [
      "in a calibrator's place",
      toText(94),
      "calibrator-before",
      ["sweep-present", "fail", "a table is no recording"],
    ],
    [
      "with bands missing",
      toText(
        76,
        undefined,
        HZ.filter((f) => f > 200),
      ),
      "short-76",
      ["sweep-complete", "warn", "bands missing"],
    ],
    [
      "with few rows",
      toText(76, undefined, [20, 200, 2000, 20_000]),
      "short-76",
      ["sweep-complete", "warn", "coarse table"],
    ],
    ["that is none", "Dear diary", "short-76", ["readable", "fail", "not readable"]],
  ])("%s", async (_, text, slot, said) => {
    expect(speaking(await checkArrival(toRequest(text, slot)))).toContainEqual(said);
  });

  it("compares with recordings on the scale of their calibrator", async () => {
    const tone: ArrivalSibling = {
      file: "cal.wav",
      digest: "c".repeat(64),
      channel: 1,
      place: planned.find((run) => run.slot === "calibrator-before") ?? null,
      state: "passed",
      report: {
        ...(await checkArrival(toRequest(toText(76), "short-76"))),
        tone: { frequency_Hz: 1000, level_dBFS: -30 },
      },
    };
    const report = await checkArrival(toRequest(toText(76), "short-76", [tone]));
    expect(report.measured_level_dB).toBeCloseTo(76, 2);
    // 94 dB stand for -30 dBFS: 76 dB at 1 m for -48 dBFS.
    expect(report.sweep?.level_dBFS).toBeCloseTo(-48, 2);
  });
});
