import { describe, expect, it } from "vitest";
import { toByteSource } from "../../lib/audio/byte-source";
import { readRecording } from "../../lib/audio/read-recording";
import { toPlannedRuns } from "../../lib/series/planned-runs";
import { DEMO_LABS, TO_BE_RECORDED, type DemoSeries } from "./demo-labs";
import { LOUDSPEAKERS } from "./loudspeakers";
import { recordSeries } from "./record-series";

const find = (key: string): DemoSeries => {
  const series = DEMO_LABS.flatMap((lab) => lab.series).find((s) => s.name === key);
  if (series === undefined) throw new Error(`no series ${key}`);
  return series;
};

async function read(series: DemoSeries, slot: string) {
  const recording = recordSeries(series).find((r) => r.run.slot === slot);
  if (recording === undefined) throw new Error(`no recording ${slot}`);
  const bytes = recording.makeWav();
  const { recording: heard } = await readRecording(toByteSource(Buffer.from(bytes)), {
    file: recording.run.fileName,
  });
  return { bytes, heard };
}

const toLevelDbfs = (samples: ArrayLike<number>): number =>
  10 * Math.log10(Array.from(samples).reduce((sum, x) => sum + x * x, 0) / samples.length);

describe("demo labs", () => {
  it("hold every loudspeaker, under names of their own, with plans that can be carried out", () => {
    const all = DEMO_LABS.flatMap((lab) => lab.series);
    expect(new Set(all.map((s) => s.key))).toEqual(new Set(Object.keys(LOUDSPEAKERS)));
    expect(new Set(all.map((s) => s.name)).size).toBe(all.length);
    expect(all.filter((s) => s.recorded === "none").map((s) => s.name)).toEqual([TO_BE_RECORDED]);
    for (const series of all) {
      const slots = toPlannedRuns(series.plan, "x").map((r) => r.slot);
      expect(slots).toEqual(expect.arrayContaining(Object.keys(series.mishaps)));
      if (typeof series.recorded === "object") expect(slots).toContain(series.recorded.upTo);
    }
  });

  it("have each role at work in the first lab, and no address in both", () => {
    const roles = new Set(DEMO_LABS[0]?.members.flatMap((m) => m.roles));
    expect([...roles].sort()).toEqual(["admin", "analyst", "reviewer", "tester"]);
    const emails = DEMO_LABS.flatMap((lab) => lab.members.map((m) => m.email));
    expect(new Set(emails).size).toBe(emails.length);
  });
});

describe("recordSeries", () => {
  it("records the calibrator at its level on the recorder's scale", async () => {
    const series = find("harbourtwo");
    const { heard } = await read(series, "calibrator-before");
    // A sine at full scale has -3.01 dB rms.
    expect(toLevelDbfs(heard.samples)).toBeCloseTo(94 - series.fullScaleDb - 3.0103, 2);
  });

  it("records room noise far under the quietest run", async () => {
    const series = find("harbourtwo");
    const { heard } = await read(series, "ambient");
    expect(toLevelDbfs(heard.samples)).toBeLessThan(38 - series.fullScaleDb);
  });

  it("gives the same bytes again", async () => {
    const series = find("osier5a");
    const [first, second] = [await read(series, "ambient"), await read(series, "ambient")];
    expect(Buffer.compare(first.bytes, second.bytes)).toBe(0);
  });

  it("lets the takes go wrong that are meant to", async () => {
    const series = find("osier5a");
    const bumped = await read(series, "short-91");
    const full = bumped.heard.samples.filter((x) => Math.abs(x) >= 0.999999).length;
    expect(full).toBeGreaterThan(100);
    const short = await read(series, "short-86");
    expect(short.heard.samples.length / short.heard.rateHz).toBeCloseTo(9.4, 3);
  });
});
