import { describe, expect, it } from "vitest";
import type { RunView } from "@/lib/api/runs";
import { planSchema } from "@/lib/series/plan-schema";
import { toPlannedRuns } from "@/lib/series/planned-runs";
import type { RunRow } from "./run-rows";
import { makeCheck, makeReport, makeRun, makeUpload } from "./run-samples";
import {
  toInitialName,
  toRowVerdict,
  toRunFigures,
  toRunVerdict,
  toSpeakingChecks,
} from "./verdict-words";

const planned = toPlannedRuns(planSchema.parse({}), "osier5a");

function toRow(slot: string, change: Partial<RunRow> = {}): RunRow {
  const run = planned.find((p) => p.slot === slot);
  if (run === undefined) throw new Error(`no planned run ${slot}`);
  return {
    planned: run,
    slot: { slot, open: true, lock_reason: null, excused: null },
    run: null,
    earlier: [],
    upload: null,
    ...change,
  };
}

describe("toRowVerdict", () => {
  it("says why a level is locked", () => {
    const slot = {
      slot: "short-96",
      open: false,
      lock_reason: "locked until 86 dB has passed",
      excused: null,
    };
    expect(toRowVerdict(toRow("short-96", { slot }))).toEqual({
      kind: "locked",
      words: "locked until 86 dB has passed",
      note: null,
    });
  });

  it("says what the closing repeat is held against", () => {
    expect(toRowVerdict(toRow("closing-76")).words).toContain("within 0.2");
  });

  it("gives an excuse with its reason", () => {
    const slot = { slot: "short-96", open: true, lock_reason: null, excused: "stand broke" };
    expect(toRowVerdict(toRow("short-96", { slot })).note).toBe("“stand broke”");
  });

  it("lets a file on its way speak before the take that it replaces", () => {
    const row = toRow("short-86", { run: makeRun({ state: "failed" }), upload: makeUpload() });
    expect(toRowVerdict(row)).toMatchObject({ kind: "going", words: "uploading, 2\u00a0s left" });
  });

  it("says why a file was refused", () => {
    const upload = makeUpload({ state: "failed", fault: "The file ends before its header says." });
    expect(toRowVerdict(toRow("short-86", { upload }))).toMatchObject({
      kind: "bad",
      note: "The file ends before its header says.",
    });
  });
});

describe("toRunVerdict", () => {
  const failing = makeReport({ checks: [makeCheck()] });
  const cases: [string, Partial<RunView>, { kind: string; words: string; note: string | null }][] =
    [
      ["passed", { state: "passed" }, { kind: "ok", words: "matches plan", note: null }],
      [
        "failed",
        { state: "failed", report: failing },
        { kind: "bad", words: "clipped input", note: "1\u2009214\u00a0samples" },
      ],
      [
        "kept",
        {
          state: "kept",
          report: failing,
          reason: "The woofer is what 86 dB is for.",
          reason_by: { id: "x", name: "Ines Varley" },
        },
        { kind: "ok", words: "clipped input, kept", note: "reason by I. Varley" },
      ],
      [
        "checking",
        { state: "checking", report: null },
        { kind: "going", words: "being checked", note: null },
      ],
    ];
  it.each(cases)("%s", (_name, change, expected) => {
    expect(toRunVerdict(makeRun(change))).toEqual(expected);
  });

  it("holds a warning's figure against its limit", () => {
    const check = makeCheck({
      code: "level-step",
      verdict: "warn",
      title: "step off",
      figure: { value: 0.31, limit: 0.2, unit: "dB" },
    });
    const run = makeRun({ state: "warned", report: makeReport({ checks: [check] }) });
    expect(toRunVerdict(run).note).toBe("0.31\u00a0dB, limit 0.2\u00a0dB");
  });
});

describe("toSpeakingChecks", () => {
  it("puts failures before warnings and leaves passed checks out", () => {
    const checks = [
      makeCheck({ code: "hum", verdict: "warn" }),
      makeCheck({ code: "rate", verdict: "pass" }),
      makeCheck({ code: "clipping", verdict: "fail" }),
    ];
    const run = makeRun({ report: makeReport({ checks }) });
    expect(toSpeakingChecks(run).map((c) => c.code)).toEqual(["clipping", "hum"]);
  });
});

describe("toRunFigures", () => {
  it("marks the column that a failed check speaks of", () => {
    const report = makeReport({ peak_dBFS: 0, measured_level_dB: null, checks: [makeCheck()] });
    const figures = toRunFigures(makeRun({ report }));
    expect(figures).toMatchObject({ peak: "0.0", level: null, length: "12.85\u00a0s" });
    expect([...figures.faulty]).toEqual(["peak"]);
  });

  it("has no values before the report is there", () => {
    expect(toRunFigures(null)).toMatchObject({ length: null, peak: null, level: null, snr: null });
  });
});

describe("toInitialName", () => {
  it.each([
    ["Ines Varley", "I. Varley"],
    ["Maro", "Maro"],
    ["  Tomas de  Reith ", "T. Reith"],
  ])("%s", (name, expected) => {
    expect(toInitialName(name)).toBe(expected);
  });
});
