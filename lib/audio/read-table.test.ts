import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { AppError } from "../errors/app-error";
import { readTable } from "./read-table";

const read = (text: string) => readTable(new TextEncoder().encode(text), "run.txt");

describe("readTable", () => {
  it.each([
    ["blanks", "20 80.5\n40 81.25\n"],
    ["tabs and carriage returns", "20\t80.5\r\n40\t81.25\r\n"],
    ["commas", "20,80.5\n40,81.25"],
    ["commas and blanks", "20, 80.5\n40, 81.25"],
    ["semicolons and decimal commas", "20;80,5\n40;81,25"],
    ["tabs and decimal commas", "20,0\t80,5\n40,0\t81,25"],
    ["blanks and decimal commas", "20,0 80,5\n40,0 81,25"],
    ["exponents", "2e1 8.05E+1\n4.0e1 8.125e1"],
    [
      "comments of every habit",
      '* made by a bench\n; and so\n# on\n"Freq","SPL"\n20 80.5\n40 81.25',
    ],
    ["a falling order", "40 81.25\n20 80.5"],
    [
      "columns in another order, by head",
      "Phase (deg)\tSPL (dB)\tFrequency (Hz)\n1\t80.5\t20\n2\t81.25\t40",
    ],
    ["kilohertz", "Freq (kHz);Level (dB)\n0,02;80,5\n0,04;81,25"],
    ["a byte-order mark", "\uFEFF20 80.5\n40 81.25"],
    ["a head of names over a line of units", "Frequency Level\nHz dB\n20 80.5\n40 81.25"],
    ["a comment that is the head", "* Freq(Hz) SPL(dB)\n20 80.5\n40 81.25"],
  ])("reads %s", (_, text) => {
    const table = read(text);
    expect(table.frequencyHz).toEqual([20, 40]);
    expect(table.levelDb).toEqual([80.5, 81.25]);
  });

  it("finds phase, harmonics with their units and THD by the head", () => {
    const table = read(
      "Freq (Hz),SPL (dB),Phase (deg),H2 (%),H3 (dB re fundamental),4th harmonic (dB SPL),THD (%)\n100,90,-12,0.5,-40,41,1.1\n200,91,-13,0.6,-41,42,1.2",
    );
    expect(table.phaseDeg).toEqual([-12, -13]);
    expect(table.thdPercent).toEqual([1.1, 1.2]);
    expect(table.harmonics).toEqual([
      { order: 2, unit: "percent", values: [0.5, 0.6] },
      { order: 3, unit: "dB re fundamental", values: [-40, -41] },
      { order: 4, unit: "dB SPL", values: [41, 42] },
    ]);
  });

  it.each([
    ["semicolons and decimal commas beside whole numbers", "f;level;THD\n20;80,5;1\n40;81,5;2"],
    ["commas with blanks after them", "f, level, THD\n20, 80.5, 1\n40, 81.5, 2"],
  ])("reads every cell: %s", (_, text) => {
    expect(read(text)).toMatchObject({ levelDb: [80.5, 81.5], thdPercent: [1, 2] });
  });

  it("takes columns that were mapped by hand", () => {
    const bytes = new TextEncoder().encode("a b c\n1 80 20\n2 81 40\n");
    const table = readTable(bytes, "run.txt", {
      frequency: 3,
      level: 2,
      harmonics: [],
      kilohertz: false,
    });
    expect([table.frequencyHz, table.levelDb]).toEqual([
      [20, 40],
      [80, 81],
    ]);
  });

  it("skips rows without a level and reads UTF-16 and Latin-1", () => {
    expect(read("20 80\n30 -\n40 81").frequencyHz).toEqual([20, 40]);
    const utf16 = new Uint8Array(
      new Uint16Array(Array.from("\uFEFF20 80\n40 81", (c) => c.charCodeAt(0))).buffer,
    );
    expect(readTable(utf16, "run.txt").levelDb).toEqual([80, 81]);
    const latin1 = Uint8Array.from(
      "Frequenz [Hz];Pegel [dB];Phase [\xb0]\n20;80;0\n40;81;0".split(""),
      (c) => c.charCodeAt(0),
    );
    expect(readTable(latin1, "run.txt").levelDb).toEqual([80, 81]);
  });

  it.each([
    ["no text", "\0\x01\x02", "table.not-readable"],
    ["prose", "There was a loudspeaker.\nIt was loud.", "table.not-readable"],
    ["one column", "20\n40\n", "table.not-readable"],
    ["one row", "20 80", "table.not-readable"],
    ["a frequency twice", "20 80\n20 81\n40 82", "table.not-readable"],
    ["a head without a level", "Freq (Hz),Impedance (ohm)\n20,8\n40,9", "table.column-missing"],
  ])("refuses %s", (_, text, code) => {
    expect(() => read(text)).toThrow(expect.objectContaining({ code, file: "run.txt" }));
  });

  it("gives a table or a typed error for any bytes (fuzzed)", () => {
    fc.assert(
      fc.property(
        fc.oneof(
          fc.uint8Array({ maxLength: 200 }),
          fc.string({ maxLength: 200 }).map((s) => new TextEncoder().encode(s)),
        ),
        (bytes) => {
          let outcome: unknown;
          try {
            outcome = readTable(bytes, "x").frequencyHz.length;
          } catch (error) {
            outcome = error instanceof AppError ? error.code : error;
          }
          expect(outcome).toSatisfy((o) => typeof o === "number" || typeof o === "string");
        },
      ),
      { numRuns: 300 },
    );
  });

  it("reads back what was printed, in every dialect (property)", () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.tuple(fc.integer({ min: 1, max: 40_000 }), fc.integer({ min: -5000, max: 15_000 })),
          { minLength: 2, maxLength: 30 },
        ),
        fc.constantFrom("\t", ";", " "),
        fc.boolean(),
        (pairs, mark, decimalComma) => {
          const unique = [...new Map(pairs)].sort((a, b) => a[0] - b[0]);
          fc.pre(unique.length >= 2);
          const print = (x: number): string =>
            decimalComma ? x.toFixed(2).replace(".", ",") : x.toFixed(2);
          const table = read(
            unique.map(([f, level]) => `${print(f)}${mark}${print(level / 100)}`).join("\n"),
          );
          expect(table.frequencyHz).toEqual(unique.map(([f]) => f));
          table.levelDb.forEach((level, i) => expect(level).toBeCloseTo(unique[i]![1] / 100, 9));
        },
      ),
    );
  });
});
