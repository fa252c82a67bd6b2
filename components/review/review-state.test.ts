import { describe, expect, it } from "vitest";
import type { Decision } from "@/lib/review/review-schema";
import { makeSampleResult } from "../../tests/support/sample-result";
import {
  countReview,
  findNextOpen,
  sayOpenBands,
  toBandDecisions,
  toComputedCause,
  toNewest,
  toRange,
  toShownDecisions,
  toWanted,
} from "./review-state";

const result = makeSampleResult();
const { bands } = result;
const me = { id: "5c1e7c52-0000-4000-8000-000000000002", name: "Tomas Reith" };
const decision = (nominal_Hz: number, over: Partial<Decision> = {}): Decision => ({
  nominal_Hz,
  version: 1,
  cause: "limiter",
  computed_cause: "limiter",
  changed: false,
  reason: null,
  by: { id: "5c1e7c52-0000-4000-8000-000000000001", name: "Maro Oduya" },
  at: "2026-05-11T09:14:00.000Z",
  ...over,
});
const want = (nominal_Hz: number, cause: Decision["cause"], seen_version: number) => ({
  nominal_Hz,
  cause,
  reason: "air noise",
  seen_version,
});

describe("toShownDecisions", () => {
  it("lays what waits over what the server has, in its order", () => {
    const shown = toShownDecisions(
      [decision(50), decision(63)],
      [
        { decisions: [want(63, "port", 1)], atMs: 0 },
        { decisions: [want(63, null, 2), want(80, "compressor", 0)], atMs: 1 },
      ],
      bands,
      me,
    );
    expect(shown.get(50)).toMatchObject({ waiting: false, by: { name: "Maro Oduya" } });
    expect(shown.get(63)).toMatchObject({ version: 3, cause: null, waiting: true });
    expect(shown.get(80)).toMatchObject({ version: 1, changed: false, by: me });
    expect([...toBandDecisions(shown)]).toEqual([
      [50, { state: "confirmed", cause: "limiter" }],
      [80, { state: "confirmed", cause: "compressor" }],
    ]);
    const next = { nominal_Hz: 63, cause: "port", reason: null } as const;
    expect(toWanted(shown, [next])[0]?.seen_version).toBe(3);
    expect(toWanted(shown, [{ ...next, nominal_Hz: 100 }])[0]?.seen_version).toBe(0);
  });
});

describe("toNewest", () => {
  it("keeps the later version of each band, whichever reading brought it", () => {
    const late = [decision(50, { version: 2, cause: null }), decision(63)];
    const early = [decision(50), decision(63, { version: 3, cause: "port" }), decision(80)];
    for (const readings of [
      [late, early],
      [early, late],
    ] as const) {
      const newest = toNewest(...readings).toSorted((a, b) => a.nominal_Hz - b.nominal_Hz);
      expect(newest.map((one) => [one.nominal_Hz, one.version, one.cause])).toEqual([
        [50, 2, null],
        [63, 3, "port"],
        [80, 1, "limiter"],
      ]);
    }
  });
});

describe("the open bands", () => {
  const none = new Map();
  it("are counted apart by whether the analysis found something", () => {
    const count = countReview(bands, none);
    expect([count.total, count.decided]).toEqual([27, 0]);
    expect(count.openWithFinding[0]?.nominal_Hz).toBe(40);
    expect(count.openWithFinding.length + count.openWithoutFinding.length).toBe(27);
    expect(sayOpenBands(count)).toMatch(
      /^\d+ have no finding\. Next with one: 40\u00a0Hz, then 50\u00a0Hz\.$/,
    );
  });

  it("are gone to upwards, findings first, round at the top", () => {
    expect(findNextOpen(bands, none, 63)).toBe(80);
    expect(findNextOpen(bands, none, 80)).toBe(2000);
    const last = countReview(bands, none).openWithFinding.at(-1)?.nominal_Hz ?? 0;
    expect(findNextOpen(bands, none, last)).toBe(40);
    const all = toShownDecisions(
      bands.filter((band) => band.nominal_Hz !== 250).map((band) => decision(band.nominal_Hz)),
      [],
      bands,
      me,
    );
    expect(findNextOpen(bands, all, 63)).toBe(250);
    expect(findNextOpen(bands, all, 250)).toBeNull();
    expect(sayOpenBands(countReview(bands, all))).toBe("1 has no finding.");
  });
});

describe("toRange", () => {
  it.each([
    [50, 100],
    [100, 50],
  ])("from %d to %d Hz", (from, to) => {
    expect(toRange(bands, from, to).map((band) => band.nominal_Hz)).toEqual([50, 63, 80, 100]);
  });
});

describe("toComputedCause", () => {
  it("is what the wall shows under the criterion", () => {
    const at125 = bands.find((band) => band.nominal_Hz === 125);
    if (at125 === undefined) throw new Error("no band");
    const distorting = {
      ...at125,
      limits: at125.limits.map((limit) => ({
        ...limit,
        ...(limit.criterion.thd_percent === 3
          ? { status: "found" as const, bound_by: "thd" as const, nominal_dB: 95 }
          : {}),
      })),
    };
    expect(toComputedCause(result, distorting, { thd_percent: 3 })).toBe("distortion only");
    expect(toComputedCause(result, distorting, { compression_dB: 3 })).toBe("none");
  });
});
