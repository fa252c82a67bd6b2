import { describe, expect, it } from "vitest";
import { synthesiseStimulus } from "../analysis/sweep";
import { toByteSource } from "../audio/byte-source";
import { readWav } from "../audio/read-wav";
import { planSchema, type Plan } from "./plan-schema";
import { toPlannedRuns } from "./planned-runs";
import { toCheckListText, toConditioningFiles, toStimulusFile } from "./stimulus-files";

const plan = planSchema.parse({
  levels: [{ level_dB: 76 }, { level_dB: 86, long_term: true }],
  sweep: { length_s: 1 },
  conditioning: { minutes: 0.05, crest_dB: 12, rms_re_sweep_dB: -9, gap_s: 0.5 },
});
const planned = toPlannedRuns(plan, "fennel5");
const conditioningOf = (of: Plan) =>
  toConditioningFiles(of, toPlannedRuns(of, "fennel5"), "fennel5");
const read = (file: { read: () => Iterable<Uint8Array>; bytes: number }) => {
  const bytes = Buffer.concat([...file.read()]);
  expect(bytes).toHaveLength(file.bytes);
  return readWav(toByteSource(bytes), "stimulus.wav");
};

describe("stimulus files", () => {
  it("differ between levels by their exact gain alone", () => {
    const shape = {
      startHz: 20,
      stopHz: 20_000,
      lengthS: 1,
      rateHz: 48_000,
      leadInS: 1,
      leadOutS: 0.8,
    };
    for (const [slot, gainDb] of [
      ["short-86", -3],
      ["short-76", -13],
      ["closing-76", -13],
    ] as const) {
      const run = planned.find((p) => p.slot === slot);
      const file = run === undefined ? null : toStimulusFile(plan, run);
      expect(file?.name).toBe(run?.fileName);
      if (file === null) throw new Error(`no stimulus for ${slot}`);
      const audio = read(file);
      expect([audio.rateHz, audio.bits, audio.channels]).toEqual([48_000, 24, 1]);
      const wanted = synthesiseStimulus({ ...shape, gainDb });
      let worst = 0;
      audio.samples[0]?.forEach((sample, n) => {
        worst = Math.max(worst, Math.abs(sample - (wanted[n] ?? 0)));
      });
      // Half a step of 24 bits.
      expect(worst).toBeLessThanOrEqual(2 ** -24 + 1e-12);
    }
  });

  it.each(["calibrator-before", "ambient"])("there is none for %s", (slot) => {
    const run = planned.find((p) => p.slot === slot);
    expect(run && toStimulusFile(plan, run)).toBeNull();
  });

  it("the conditioning noise lasts its minutes and peaks where the plan puts it", () => {
    const file = conditioningOf(plan).get("conditioning");
    if (file === undefined) throw new Error("no conditioning noise");
    expect(file.name).toBe("fennel5_86_conditioning.wav");
    const audio = read(file);
    expect(audio.frames).toBe(3 * 48_000);
    const peak = Array.from(audio.samples[0] ?? []).reduce((a, x) => Math.max(a, Math.abs(x)), 0);
    // Sweep peak -3, a sine's rms 3.01 under it, the noise 9 dB under that, its crest 12.
    expect(20 * Math.log10(peak)).toBeCloseTo(-3.01, 2);
  });

  it("there is conditioning noise for each long-term level, and none without", () => {
    const two = planSchema.parse({
      ...plan,
      levels: plan.levels.map((level) => ({ ...level, long_term: true })),
    });
    expect([...conditioningOf(two)].map(([slot, file]) => [slot, file.name])).toEqual([
      ["conditioning", "fennel5_86_conditioning.wav"],
      ["conditioning-86", "fennel5_86_conditioning.wav"],
      ["conditioning-76", "fennel5_76_conditioning.wav"],
    ]);
    expect(conditioningOf(planSchema.parse({})).size).toBe(0);
  });

  it("the check-list is plain text with a box per step", () => {
    const text = toCheckListText(plan, "Osier 5A, S-0236");
    expect(text.split("\r\n")[0]).toBe("Osier 5A, S-0236");
    expect(text).toMatch(/^1\. \[ \] Calibrator on the microphone: 94 dB/m);
  });
});
