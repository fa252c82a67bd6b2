import { describe, expect, it } from "vitest";
import { measureTone } from "../analysis/calibration";
import { Plans } from "../analysis/cell-power";
import { AnalysisError, AppError, FileError } from "../errors/app-error";
import { mayRetry, toFailure } from "./failure";

const place = {
  analysisId: "7f3a0000-0000-4000-8000-000000000000",
  version: 2,
  attempt: 1,
  at: new Date("2026-05-12T09:41:00Z"),
  slotByFile: new Map([["fennel5_96_short.wav", "short-96"]]),
};

describe("toFailure", () => {
  it("names run, file, remedy and report", () => {
    const error = new AnalysisError("run.no-sweep", "No sweep was found in 96.", {
      file: "fennel5_96_short.wav",
    });
    expect(toFailure(error, place)).toEqual({
      code: "run.no-sweep",
      message: "No sweep was found in 96.",
      slot: "short-96",
      file: "fennel5_96_short.wav",
      remedy: expect.stringContaining("record this run again") as string,
      report: "7F3A-2.1",
      at: "2026-05-12T09:41:00.000Z",
    });
  });

  it.each([
    ["a plain error", new Error("secret of the inside")],
    ["an internal one", new AppError("internal", "secret of the inside")],
    ["no error at all", "secret of the inside"],
  ])("tells nothing of %s", (_name, error) => {
    const failure = toFailure(error, place);
    expect(failure.code).toBe("internal");
    expect(JSON.stringify(failure)).not.toContain("secret");
  });

  it.each([
    ["audio.truncated", /Export the recording again/],
    ["calibration.not-a-tone", /input gain/],
    ["analysis.argument", /report number/],
  ] as const)("has a remedy for %s", (code, remedy) => {
    expect(toFailure(new FileError(code, "x"), place).remedy).toMatch(remedy);
  });
});

it("says once what to do about a calibrator that is no tone", () => {
  const silence = {
    file: "calibrator.wav",
    rateHz: 48_000,
    fullScale: 1,
    samples: new Float32Array(48_000),
  };
  let thrown: unknown;
  try {
    measureTone(silence, 1000, new Plans());
  } catch (error) {
    thrown = error;
  }
  const { message, remedy } = toFailure(thrown, place);
  expect(`${message} ${remedy}`.match(/again/g)).toEqual(["again"]);
});

describe("mayRetry", () => {
  it.each([
    [new AppError("database.unavailable", "x"), true],
    [new AppError("storage.missing", "x"), true],
    [new AnalysisError("run.no-sweep", "x"), false],
    [new Error("x"), true],
  ])("%o: %s", (error, expected) => {
    expect(mayRetry(error)).toBe(expected);
  });
});
