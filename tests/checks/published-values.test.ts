/** Every row of lib/checks against its source, and each row and constant moved until it must fail. */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import { agrees, runChecks, SUBJECTS, type CheckOutcome } from "../../lib/checks/check";
import { CHECKS } from "../../lib/checks/checks";
import { reportSchema, toReport, toReportText } from "../../lib/checks/report";
import { DOCUMENTS, toEvidence } from "../../lib/checks/sources";

const root = join(import.meta.dirname, "../..");
const valuesText = readFileSync(join(root, "docs/check-values.md"), "utf8");

let outcomes: CheckOutcome[] = [];
beforeAll(async () => {
  outcomes = await runChecks(CHECKS);
});
const outcomeOf = (id: string): CheckOutcome => {
  const outcome = outcomes.find(({ check }) => check.id === id);
  if (outcome === undefined) throw new Error(`no check ${id}`);
  return outcome;
};

describe.each(Object.entries(SUBJECTS))("%s", (subject) => {
  const rows = CHECKS.filter((check) => check.subject === subject);

  it("has checks", () => expect(rows.length).toBeGreaterThan(2));

  it.each(rows)("$what: $expected $unit ($source)", ({ id, expected, tolerance }) => {
    expect(Math.abs(outcomeOf(id).value - expected)).toBeLessThanOrEqual(tolerance);
  });

  it("fails in every row whose expected value is moved by two tolerances, up or down", () => {
    const standing = rows.flatMap(({ id, expected, tolerance }) =>
      [-2, 2]
        .filter((by) => agrees(outcomeOf(id).value, expected + by * tolerance, tolerance))
        .map((by) => `${id} by ${by}`),
    );
    expect(standing).toEqual([]);
  });
});

describe("rows", () => {
  it("have names of their own and tolerances above zero", () => {
    const ids = CHECKS.map(({ id }) => id);
    expect(new Set(ids).size).toBe(ids.length);
    expect(CHECKS.filter(({ tolerance }) => !(tolerance > 0)).map(({ id }) => id)).toEqual([]);
  });

  it("say how they are known, and cite documents by their own words", () => {
    const known = new Set<string>([...Object.keys(DOCUMENTS), "C", "M"]);
    const unsaid = CHECKS.filter(({ source }) => {
      const tags = toEvidence(source);
      return tags.length === 0 || tags.some((tag) => !known.has(tag));
    });
    expect(unsaid.map(({ id, source }) => [id, source])).toEqual([]);
    const section = valuesText.slice(valuesText.indexOf("## 15."));
    for (const [number, words] of Object.entries(DOCUMENTS)) {
      expect(section).toContain(`${number} ${words}.`);
    }
    const cited = new Set(CHECKS.flatMap(({ source }) => toEvidence(source)));
    expect(Object.keys(DOCUMENTS).filter((number) => !cited.has(number))).toEqual([]);
  });

  it("a value that is no number does not agree", () => {
    expect(agrees(Number.NaN, 0, 1)).toBe(false);
  });
});

/** Worked checks of docs/check-values.md section 14 that speak of what the product does not compute. */
const NOT_COMPUTED: Record<number, string> = {
  5: "class 1 limits are for sound level meters, which we do not judge",
  30: "THD_R is not given; every figure is THD_F",
  41: "the engine measures time constants of others and has none of its own",
  46: "tone bursts and means of pascals are not used",
  49: "levels are mean squares; no F or S time weighting",
};

describe("worked checks of docs/check-values.md", () => {
  const section = valuesText.slice(valuesText.indexOf("## 14."), valuesText.indexOf("## 15."));
  const numbers = Array.from(section.matchAll(/^(\d+)\. /gm), (match) => Number(match[1]));

  it("are fifty", () => expect(numbers).toEqual(Array.from({ length: 50 }, (_, i) => i + 1)));

  it.each(numbers)("%i has a row, or a reason for none", (number) => {
    const rows = CHECKS.filter(({ worked }) => worked?.includes(number));
    expect(rows.length > 0).toBe(NOT_COMPUTED[number] === undefined);
  });
});

describe("lib/checks/report.json", () => {
  const text = readFileSync(join(root, "lib/checks/report.json"), "utf8");

  it("is what the checks give now; `npm run checks` writes it anew", () => {
    expect(text).toBe(toReportText(toReport(outcomes)));
  });

  it("counts every row once", () => {
    const report = reportSchema.parse(JSON.parse(text));
    const shown = report.subjects.flatMap(({ rows, tables }) => [
      rows.length,
      ...tables.map(({ count }) => count),
    ]);
    expect(shown.reduce((sum, count) => sum + count, 0)).toBe(CHECKS.length);
    expect([report.total, report.agreeing]).toEqual([CHECKS.length, CHECKS.length]);
  });

  it("tells a check that does not agree", () => {
    const [first] = outcomes;
    const wrong = { ...first!, value: first!.value + 1, agrees: false };
    const report = toReport([wrong]);
    expect([report.total, report.agreeing]).toEqual([1, 0]);
    expect(report.subjects[0]?.rows[0]?.agrees).toBe(false);
  });
});
