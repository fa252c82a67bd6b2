/** Arrival checks through the worker: a good take, a bad one, and a calibrator that comes late. */
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { listRuns } from "../../lib/api/runs";
import { call, openApiBench, planTestSeries, target, until, type ApiBench } from "../api/support";
import { getTestSeries, type TestFile } from "../support/test-series";
import { uploadWhole } from "../support/tus";

let bench: ApiBench;
beforeAll(async () => {
  bench = await openApiBench();
});
afterAll(() => bench.stop());

function fileOf(slot: string): TestFile {
  const file = getTestSeries().files.find((one) => one.slot === slot);
  if (file === undefined) throw new Error(`the test series has no ${slot}`);
  return file;
}

const upload = (seriesId: string, { name, bytes }: Pick<TestFile, "name" | "bytes">) =>
  uploadWhole(target(bench), bytes, { seriesId, fileName: name });

/** The live run of a slot, once it has been checked as wanted. */
async function checked(
  seriesId: string,
  slot: string,
  wanted: (levelDb: number | null) => boolean = () => true,
) {
  const { runs } = await until(
    bench,
    () => call(bench, listRuns, { params: { seriesId } }),
    (answer) =>
      answer.runs.some(
        (run) =>
          run.slot === slot &&
          run.state !== "checking" &&
          run.report !== null &&
          wanted(run.report.measured_level_dB),
      ),
  );
  const run = runs.find((one) => one.slot === slot);
  if (run?.report == null) throw new Error(`no report of ${slot}`);
  return { state: run.state, report: run.report };
}

/** The first seconds of a 24-bit mono WAV, with a header that says so. */
function shorten(bytes: Uint8Array, seconds: number): Uint8Array<ArrayBuffer> {
  const dataBytes = Math.round(seconds * 48_000) * 3;
  const short = bytes.slice(0, 44 + dataBytes);
  const view = new DataView(short.buffer);
  view.setUint32(4, 36 + dataBytes, true);
  view.setUint32(40, dataBytes, true);
  return short;
}

describe("a recording that arrives", () => {
  it("passes, and has its level told anew when the calibrator comes after it", async () => {
    const { id } = await planTestSeries(bench);
    await upload(id, fileOf("short-76"));
    const alone = await checked(id, "short-76");
    expect(alone.state).toBe("passed");
    expect(alone.report.measured_level_dB).toBeNull();
    expect(alone.report.envelope).toMatchObject({ from_Hz: 20, to_Hz: 20_000 });
    await upload(id, fileOf("calibrator-before"));
    const { state, report } = await checked(id, "short-76", (levelDb) => levelDb !== null);
    expect(state).toBe("passed");
    expect(report.measured_level_dB).toBeCloseTo(76, 0);
    expect(report.checks.map(({ code }) => code)).toContain("level-plan");
    expect((await checked(id, "calibrator-before")).report.measured_level_dB).toBe(94);
  });

  it("fails where the recorder stopped early, and says what is missing", async () => {
    const { id } = await planTestSeries(bench);
    const { name, bytes } = fileOf("short-76");
    await upload(id, { name, bytes: shorten(bytes, 2.4) });
    const { state, report } = await checked(id, "short-76");
    expect(state).toBe("failed");
    const failed = report.checks.filter(({ verdict }) => verdict === "fail");
    expect(failed.map(({ code }) => code)).toEqual(["sweep-complete"]);
    expect(failed[0]?.finding).toMatch(/stops after 2\.40 s/);
    expect(failed[0]?.bands_Hz.at(-1)).toBe(16_000);
    expect(failed[0]?.where?.from_s).toBeCloseTo(2.4, 3);
    expect(failed[0]?.remedy).toMatch(/same gain/);
  });
});
