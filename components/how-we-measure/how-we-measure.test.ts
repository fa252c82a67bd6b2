import { describe, expect, it } from "vitest";
import report from "@/lib/checks/report.json";
import { toHowWeMeasureBody } from "./how-we-measure";

describe("the page How we measure", () => {
  const markup = toHowWeMeasureBody(report).text;

  it("holds every single check with its source, and every table by its count", () => {
    const text = markup
      .replaceAll(/<[^>]+>/g, "")
      .replaceAll("&#39;", "'")
      .replaceAll("&quot;", '"')
      .replaceAll("&gt;", ">")
      .replaceAll("&lt;", "<")
      .replaceAll("&amp;", "&");
    for (const { rows, tables } of report.subjects) {
      for (const { what, value, source } of rows) {
        for (const part of [what, value, source]) expect(text).toContain(part);
      }
      for (const { agreeing, count, name } of tables) {
        expect(text).toContain(`${agreeing} of ${count} values agree: ${name}`);
      }
    }
    expect(text).toContain(`${report.agreeing} of ${report.total} agree`);
  });

  it("says in words where a check does not agree", () => {
    const [first, ...rest] = report.subjects;
    const rows = first!.rows.map((row) => ({ ...row, agrees: false }));
    const wrong = { ...report, subjects: [{ ...first!, rows }, ...rest] };
    const marks = toHowWeMeasureBody(wrong).text;
    expect(marks.split('aria-label="does not agree"')).toHaveLength(rows.length + 1);
    expect(markup).not.toContain("does not agree");
  });

  it("draws four pictures and needs no script", () => {
    expect(markup.split("<svg").length - 1).toBeGreaterThan(4);
    expect(markup).not.toMatch(/<script|onclick/i);
  });
});
