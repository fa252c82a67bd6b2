import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { digestDecisions, toDecisionsText, toSignedDecisions } from "./digest-decisions";
import type { Decision } from "./review-schema";
import { findSignOffRefusal, isJudged, type SignOffFacts } from "./sign-off-rules";

const decision = (nominal_Hz: number, over: Partial<Decision> = {}): Decision => ({
  nominal_Hz,
  version: 1,
  cause: "limiter",
  computed_cause: "limiter",
  changed: false,
  reason: null,
  by: { id: "5c1e7c52-0000-4000-8000-000000000001", name: "T. Reith" },
  at: "2026-05-11T09:14:00.000Z",
  ...over,
});

describe("digestDecisions", () => {
  const signed = toSignedDecisions([decision(80), decision(63)], [63, 80]);

  it("is the SHA-256 of the decisions in rising frequency and in one order of keys", () => {
    const text =
      '[{"nominal_Hz":63,"cause":"limiter","computed_cause":"limiter","reason":null,"by":"T. Reith","at":"2026-05-11T09:14:00.000Z"},' +
      '{"nominal_Hz":80,"cause":"limiter","computed_cause":"limiter","reason":null,"by":"T. Reith","at":"2026-05-11T09:14:00.000Z"}]';
    expect(toDecisionsText(signed ?? [])).toBe(text);
    expect(digestDecisions(signed ?? [])).toBe(createHash("sha256").update(text).digest("hex"));
  });

  it("is another for another reason, and none while a band is open", () => {
    const other = toSignedDecisions(
      [decision(63), decision(80, { cause: "port", reason: "air" })],
      [63, 80],
    );
    expect(digestDecisions(other ?? [])).not.toBe(digestDecisions(signed ?? []));
    expect(toSignedDecisions([decision(63)], [63, 80])).toBeNull();
    expect(toSignedDecisions([decision(63), decision(80, { cause: null })], [63, 80])).toBeNull();
    expect(toSignedDecisions([], [])).toBeNull();
  });
});

describe("findSignOffRefusal", () => {
  const facts: SignOffFacts = {
    mayDecide: true,
    archived: false,
    signedVersion: null,
    version: 3,
    analysisDone: true,
    currentVersion: 3,
    underWay: false,
    bandsTotal: 27,
    bandsDecided: 27,
    twoPersonRule: true,
    uploadedByCaller: 0,
  };

  it("lets pass what is decided, current, and recorded by somebody else", () => {
    expect(findSignOffRefusal(facts)).toBeNull();
    expect(findSignOffRefusal({ ...facts, twoPersonRule: false, uploadedByCaller: 4 })).toBeNull();
  });

  it.each([
    [{ mayDecide: false }, "auth.forbidden", "An analyst signs off."],
    [{ archived: true }, "conflict.state", "archived"],
    [{ signedVersion: 2 }, "conflict.state", "Version 2 is signed off already"],
    [{ analysisDone: false }, "conflict.state", "no result"],
    [{ underWay: true }, "conflict.state", "under way"],
    [{ currentVersion: 4 }, "conflict.state", "replaced by version 4"],
    [{ bandsDecided: 12 }, "conflict.state", "15 of 27 bands have no decision yet."],
    [{ bandsDecided: 26 }, "conflict.state", "1 of 27 bands has no decision yet."],
    [{ bandsTotal: 0, bandsDecided: 0 }, "conflict.state", "0 of 0 bands"],
    [{ uploadedByCaller: 2 }, "auth.forbidden", "You uploaded 2 runs of this version"],
    [{ uploadedByCaller: 1, bandsDecided: 26 }, "conflict.state", "1 of 27"],
  ] as const)("refuses %o", (over, code, words) => {
    const refusal = findSignOffRefusal({ ...facts, ...over });
    expect(refusal?.code).toBe(code);
    expect(refusal?.words).toContain(words);
  });
});

describe("isJudged", () => {
  const criteria = [{ thd_percent: 3 }, { thd_percent: 10 }, { compression_dB: 3 }];
  it.each([
    [{ thd_percent: 10 }, true],
    [{ thd_percent: 10, compression_dB: 3 }, true],
    [{ compression_dB: 1 }, false],
    [{ thd_percent: 5, compression_dB: 3 }, false],
  ])("%o is %s", (criterion, expected) => {
    expect(isJudged(criterion, criteria)).toBe(expected);
  });
});
