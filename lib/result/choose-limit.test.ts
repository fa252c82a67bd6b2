import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import type { Limit } from "./result-schema";
import { chooseLimit, findUsableTopHz } from "./choose-limit";

const limit = (criterion: Limit["criterion"], change: Partial<Limit> = {}): Limit => ({
  criterion,
  kind: "short-term",
  status: "not reached",
  nominal_dB: 102,
  low_dB: 102,
  high_dB: 102,
  spl_dB: 101,
  bound_by: null,
  reached: false,
  ...change,
});
const thd = (change: Partial<Limit> = {}): Limit => limit({ thd_percent: 3 }, { ...change });
const loss = (change: Partial<Limit> = {}): Limit => limit({ compression_dB: 1 }, { ...change });
const found = (nominal_dB: number, bound_by: "thd" | "compression"): Partial<Limit> => ({
  status: "found",
  nominal_dB,
  spl_dB: nominal_dB - 1,
  bound_by,
  reached: true,
});
const unknown: Partial<Limit> = {
  status: "not assessed",
  nominal_dB: null,
  spl_dB: null,
  reached: null,
};
const PAIR = { thd_percent: 3, compression_dB: 1 };

// docs/domain.md section 7: whichever comes first; "not assessed" while either half is, unless the other has failed.
describe("a pair put together from its halves", () => {
  it.each([
    ["THD first", thd(found(90, "thd")), loss(found(94, "compression")), "found", 90, "thd"],
    [
      "compression first",
      thd(found(96, "thd")),
      loss(found(94, "compression")),
      "found",
      94,
      "compression",
    ],
    ["only THD", thd(found(96, "thd")), loss(), "found", 96, "thd"],
    ["only compression", thd(), loss(found(94, "compression")), "found", 94, "compression"],
    ["neither", thd(), loss(), "not reached", 102, null],
    [
      "THD unknown, compression failed",
      thd(unknown),
      loss(found(94, "compression")),
      "found",
      94,
      "compression",
    ],
    ["THD unknown, compression not reached", thd(unknown), loss(), "not assessed", null, null],
    ["compression unknown, THD not reached", thd(), loss(unknown), "not assessed", null, null],
    [
      "already past it",
      thd({ status: "below lowest", nominal_dB: 76, bound_by: "thd" }),
      loss(found(80, "compression")),
      "below lowest",
      76,
      "thd",
    ],
  ])("%s", (_, one, other, status, nominal, boundBy) => {
    const chosen = chooseLimit({ exact_Hz: 1000, limits: [one, other] }, PAIR);
    expect(chosen).toMatchObject({
      criterion: PAIR,
      status,
      nominal_dB: nominal,
      bound_by: boundBy,
    });
  });

  it("takes the computed pair where the analysis holds it", () => {
    const pair = limit(PAIR, found(88, "thd"));
    expect(chooseLimit({ exact_Hz: 1000, limits: [thd(), loss(), pair] }, PAIR)).toBe(pair);
  });

  it("leaves THD out where its harmonics pass the usable top, and says so", () => {
    const band = { exact_Hz: 10_000, limits: [thd(unknown), loss(found(94, "compression"))] };
    const chosen = chooseLimit(band, PAIR, { usableTopHz: 20_000 });
    expect(chosen).toMatchObject({ status: "found", nominal_dB: 94 });
    expect(chosen.reason).toContain("compression alone");
    expect(
      chooseLimit({ ...band, limits: [thd(unknown), loss()] }, PAIR, { usableTopHz: 20_000 })
        .status,
    ).toBe("not reached");
  });

  it("is not assessed where a half was never computed", () => {
    const chosen = chooseLimit({ exact_Hz: 1000, limits: [loss()] }, PAIR);
    expect(chosen).toMatchObject({ status: "not assessed", nominal_dB: null });
    expect(chosen.reason).toContain("did not compute");
  });

  it("keeps short-term and long-term apart", () => {
    const long = { ...loss(found(90, "compression")), kind: "long-term" as const };
    expect(
      chooseLimit({ exact_Hz: 1000, limits: [loss(), long] }, { compression_dB: 1 }).status,
    ).toBe("not reached");
    expect(
      chooseLimit(
        { exact_Hz: 1000, limits: [loss(), long] },
        { compression_dB: 1 },
        { kind: "long-term" },
      ),
    ).toBe(long);
  });
});

describe("the usable top", () => {
  it("is twice the last fundamental with a second harmonic: just under 20 kHz in the sample", () => {
    const top = findUsableTopHz(makeSampleResult());
    expect(top).toBeGreaterThan(19_000);
    expect(top).toBeLessThanOrEqual(20_000);
  });
  it("is unknown without harmonics", () => {
    const result = makeSampleResult();
    for (const run of result.runs) run.harmonics = [];
    expect(findUsableTopHz(result)).toBeNull();
  });
});
