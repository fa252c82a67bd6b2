import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import { computedCauseFor, isWithoutFinding, listComputedCauses } from "./computed-cause";
import { findConflicts, needsReason, toNewDecisions, type WantedDecision } from "./decide";

const { bands } = makeSampleResult();
const bandAt = (hz: number) => {
  const band = bands.find((one) => one.nominal_Hz === hz);
  if (band === undefined) throw new Error(`no band ${hz}`);
  return band;
};
/** Nothing lost, but THD sets a limit under one criterion. */
const distorting = {
  ...bandAt(125),
  limits: bandAt(125).limits.map((limit) => ({
    ...limit,
    ...(limit.criterion.thd_percent === 3
      ? { status: "found" as const, bound_by: "thd" as const }
      : {}),
  })),
};

const want = (hz: number, cause: WantedDecision["cause"], over: Partial<WantedDecision> = {}) => ({
  nominal_Hz: hz,
  cause,
  reason: null,
  seen_version: 0,
  ...over,
});

describe("listComputedCauses", () => {
  it("is the cause of the analysis", () => {
    expect(listComputedCauses(bandAt(63))).toEqual(["limiter"]);
    expect(listComputedCauses(bandAt(125))).toEqual(["none"]);
  });

  it("is two where distortion alone sets a limit under one criterion", () => {
    expect(listComputedCauses(distorting)).toEqual(["distortion only", "none"]);
    expect(computedCauseFor(distorting, "none")).toBe("none");
    expect(computedCauseFor(distorting, "overload")).toBe("distortion only");
  });
});

describe("isWithoutFinding", () => {
  it.each([
    ["held by a limiter", bandAt(63), false],
    ["clean up to the loudest run", bandAt(125), true],
    ["clean, but heat took something with time", bandAt(12_500), false],
    ["limited by distortion", distorting, false],
    [
      "already lost at the lowest",
      { ...bandAt(125), onset: { ...bandAt(125).onset, status: "below lowest" as const } },
      false,
    ],
  ])("%s", (_name, band, expected) => {
    expect(isWithoutFinding(band)).toBe(expected);
  });
});

describe("needsReason", () => {
  it.each([
    ["the computed cause", "limiter", false],
    ["another cause", "port", true],
    ["none where something was found", "none", true],
    ["opening it again", null, false],
  ] as const)("%s", (_name, cause, expected) => {
    expect(needsReason(bandAt(63), cause)).toBe(expected);
  });
});

describe("toNewDecisions", () => {
  it("counts on from the version that was seen", () => {
    expect(
      toNewDecisions(
        [want(63, "limiter", { seen_version: 4 }), want(125, "port", { reason: "air noise" })],
        bands,
      ),
    ).toEqual([
      { nominalHz: 63, version: 5, cause: "limiter", computedCause: "limiter", reason: null },
      { nominalHz: 125, version: 1, cause: "port", computedCause: "none", reason: "air noise" },
    ]);
  });

  it.each([
    ["a band that is not there", [want(64, "limiter")], "request.invalid"],
    ["a band named twice", [want(63, "limiter"), want(63, "limiter")], "request.invalid"],
    [
      "distortion only, not computed",
      [want(63, "distortion only", { reason: "so" })],
      "request.invalid",
    ],
    ["a change without a reason", [want(63, "port")], "run.reason-missing"],
    [
      "a change with too short a reason",
      [want(63, "port", { reason: "no" })],
      "run.reason-missing",
    ],
    ["one of many without a reason", [want(125, "none"), want(63, "port")], "run.reason-missing"],
  ])("refuses %s", (_name, wanted, code) => {
    expect(() => toNewDecisions(wanted, bands)).toThrowError(expect.objectContaining({ code }));
  });
});

describe("findConflicts", () => {
  const inForce = [
    { nominal_Hz: 63, version: 2 },
    { nominal_Hz: 80, version: 1 },
  ];
  it.each([
    ["seen as it stands", [want(63, "port", { seen_version: 2 })], []],
    ["not decided before", [want(100, "none")], []],
    ["decided since", [want(80, "none")], [80]],
    [
      "changed since, one of two",
      [want(63, "port", { seen_version: 1 }), want(80, "none", { seen_version: 1 })],
      [63],
    ],
  ])("%s", (_name, wanted, expected) => {
    expect(findConflicts(wanted, inForce).map((one) => one.nominal_Hz)).toEqual(expected);
  });
});
