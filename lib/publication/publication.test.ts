import { describe, expect, it } from "vitest";
import { makeSampleResult } from "../../tests/support/sample-result";
import { makeSampleFacts } from "../../tests/support/sample-publication";
import { parseRevision, toNewestPath, toRevisionPath, toSlug } from "./addresses";
import { digestText, parseSnapshotText, toSnapshotText } from "./canonical";
import { toSnapshot } from "./to-snapshot";

describe("toSlug", () => {
  it.each([
    ["Osier 8A", "osier-8a"],
    ["  Brücke & Söhne No. 5 ", "brucke-sohne-no-5"],
    ["--", "loudspeaker"],
    ["Ж", "loudspeaker"],
    ["a".repeat(79) + " b", "a".repeat(79)],
  ])("%s", (name, slug) => {
    expect(toSlug(name)).toBe(slug);
    expect(slug).toMatch(/^[a-z0-9]+(-[a-z0-9]+)*$/);
  });
});

describe("addresses", () => {
  it("lead to the newest, and to one revision that never moves", () => {
    expect(toNewestPath("withy-bench", "osier-8a")).toBe("/t/withy-bench/osier-8a");
    expect(toRevisionPath("withy-bench", "osier-8a", 2)).toBe("/t/withy-bench/osier-8a/2");
  });

  it.each([
    ["1", 1],
    ["120", 120],
    ["0", null],
    ["01", null],
    ["1.0", null],
    ["card", null],
    ["9999999", null],
  ])("%s as a revision", (text, revision) => {
    expect(parseRevision(text)).toBe(revision);
  });
});

describe("toSnapshot", () => {
  const result = makeSampleResult();
  const snapshot = toSnapshot(makeSampleFacts());
  const at = (hz: number) => snapshot.bands.find((band) => band.nominal_Hz === hz);

  it("takes the figures of every band over as the analysis gave them", () => {
    expect(snapshot.bands).toHaveLength(result.bands.length);
    for (const band of result.bands) {
      const kept = at(band.nominal_Hz);
      expect(kept?.limit).toEqual(
        band.limits.find((one) => one.criterion.compression_dB === 3 && one.kind === "short-term"),
      );
      expect(kept?.onset).toEqual(band.onset);
      expect(kept?.levels.map((level) => level.spl_dB)).toEqual(
        band.levels.map((level) => level.spl_dB),
      );
    }
    expect(snapshot.headline).toEqual(result.headline[0]);
    expect(snapshot.measured.levels_dB).toEqual([76, 86, 96, 102]);
    expect(snapshot.measured.long_term_levels_dB).toEqual([102]);
  });

  it("says which cause a person changed, and why", () => {
    expect(at(50)).toMatchObject({
      cause: "port",
      cause_changed: true,
      cause_reason: "seen with the port blocked",
    });
    expect(snapshot.bands.filter((band) => band.cause_changed)).toHaveLength(1);
    const computed = result.bands.find((band) => band.nominal_Hz === 63);
    expect(at(63)).toMatchObject({
      cause: computed?.cause,
      cause_changed: false,
      cause_reason: computed?.cause_reason,
    });
  });

  it("says why there is no headline where the signed criterion has none", () => {
    const facts = makeSampleFacts();
    const other = toSnapshot({
      ...facts,
      signOff: { ...facts.signOff, criterion: { thd_percent: 10 } },
    });
    expect(other.headline).toBeNull();
    expect(other.headline_missing).toContain("two octaves");
    expect(other.bands.every((band) => band.limit.criterion.thd_percent === 10)).toBe(true);
  });

  it("refuses a sign-off that leaves a band open", () => {
    const facts = makeSampleFacts();
    const decisions = facts.signOff.decisions.filter((one) => one.nominal_Hz !== 80);
    expect(() => toSnapshot({ ...facts, signOff: { ...facts.signOff, decisions } })).toThrow(
      "80 Hz",
    );
  });
});

describe("the kept text", () => {
  it("is the same for any order of keys, and comes back whole", () => {
    const snapshot = toSnapshot(makeSampleFacts());
    const turned = Object.fromEntries(Object.entries(snapshot).reverse()) as typeof snapshot;
    expect(toSnapshotText(turned)).toBe(toSnapshotText(snapshot));
    expect(parseSnapshotText(toSnapshotText(snapshot))).toEqual(snapshot);
  });

  it("is named by another digest when one figure differs", () => {
    const snapshot = toSnapshot(makeSampleFacts());
    const other = { ...snapshot, uncertainty_dB: (snapshot.uncertainty_dB ?? 0) + 0.01 };
    expect(digestText(toSnapshotText(snapshot))).not.toBe(digestText(toSnapshotText(other)));
    expect(digestText("")).toBe("e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
  });
});
