import { describe, expect, it } from "vitest";
import { previewTable } from "../audio/preview-table";
import { readTable } from "../audio/read-table";
import { toChoice, toMeanings } from "./column-meanings";

const bytes = (text: string) => new TextEncoder().encode(text);

describe("columns of a table", () => {
  it("come recognised by their head, with the first rows", () => {
    const rows = Array.from({ length: 9 }, (_, i) => `${i + 1};80,5;1;-40`).join("\n");
    const preview = previewTable(bytes(`f [kHz];Pegel [dB];THD [%];H3 [dB rel]\n${rows}`), "a.csv");
    expect(preview).toMatchObject({ columns: 4, rows: 9 });
    expect(preview.first).toHaveLength(6);
    expect(preview.first[0]).toEqual([1, 80.5, 1, -40]);
    const meanings = toMeanings(preview.recognised, preview.columns);
    expect(meanings).toEqual(["frequency kHz", "level", "thd", "h3 dB re fundamental"]);
    expect(toChoice(meanings).choice).toEqual(preview.recognised);
  });

  it("are asked for where the head does not tell, and read as they were mapped", () => {
    const content = bytes("a,b,c\n1,76,20\n2,77,40\n");
    const { recognised, columns } = previewTable(content, "a.csv");
    expect(recognised).toBeNull();
    expect(toMeanings(recognised, columns)).toEqual(["", "", ""]);
    const { choice } = toChoice(["h2 percent", "level", "frequency"]);
    const table = readTable(content, "a.csv", choice ?? undefined);
    expect(table.frequencyHz).toEqual([20, 40]);
    expect(table.harmonics).toEqual([{ order: 2, unit: "percent", values: [1, 2] }]);
  });

  it.each([
    [["level", "", ""], "Say which column is the frequency."],
    [["frequency", "", "thd"], "Say which column is the level."],
    [["frequency", "level", "level"], "Two columns are “level, dB SPL”. Leave one out."],
    [["frequency", "frequency kHz", "level"], "Two columns are the frequency. Leave one out."],
    [
      ["frequency", "level", "h3 percent", "h3 dB SPL"],
      "The columns do not fit: must name each harmonic once.",
    ],
  ])("%j is not enough", (meanings, fault) => {
    expect(toChoice(meanings)).toEqual({ choice: null, fault });
  });

  it("are none in prose", () => {
    expect(() => previewTable(bytes("Dear diary,\nnothing."), "a.txt")).toThrow(
      expect.objectContaining({ code: "table.not-readable" }) as Error,
    );
  });
});
