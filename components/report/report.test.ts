import { inflateSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import type { Standing } from "@/lib/kit/standing";
import type { Snapshot } from "@/lib/publication/snapshot-schema";
import { makeSampleSnapshot } from "@/tests/support/sample-publication";
import { drawReport, PAPERS } from "./report";
import { toPrintable } from "./report-fonts";

const LIVE: Standing = { state: "live", replacedBy: null, withdrawn: null, timeZone: "UTC" };
const REPLACED: Standing = {
  ...LIVE,
  state: "replaced",
  replacedBy: { revision: 2, at: new Date("2026-06-01T09:00:00Z") },
};
const PAGE = "https://tests.example/t/reedholm/osier-8a/1";
const usual = makeSampleSnapshot();

/** More runs, longer words, more lines of answer than usual. */
const crowded: Snapshot = {
  ...usual,
  criterion: { thd_percent: 10, compression_dB: 3 },
  supplied_by: "bought by the lab from a shop in the next town ".repeat(4).trim().slice(0, 200),
  headline: null,
  headline_missing:
    "No range of two octaves or more stays within 3 dB of the usual limit, so no single figure says how loud it plays.",
  bands: usual.bands.map((band) => ({
    ...band,
    levels: [
      ...band.levels,
      ...band.levels.slice(0, 3).map((run) => ({ ...run, level_dB: run.level_dB + 3 })),
    ],
  })),
};

async function readReport(snapshot: Snapshot, standing: Standing, paper: "a4" | "letter") {
  const bytes = await drawReport({ snapshot, standing, page: PAGE, paper });
  const text = Buffer.from(bytes).toString("latin1");
  return {
    bytes,
    pages: text.match(/\/Type \/Page\b(?!s)/g)?.length,
    box: /\/MediaBox \[0 0 ([\d.]+) ([\d.]+)\]/
      .exec(text)
      ?.slice(1)
      .map((side) => Math.round(Number(side) * 100) / 100),
    drawing: [...text.matchAll(/stream\r?\n([\s\S]*?)\r?\nendstream/g)]
      .map(([, stream = ""]) => inflate(stream))
      .join("\n"),
  };
}

/** A stream in plain text; "" for one that is packed in another way. */
function inflate(stream: string): string {
  try {
    return inflateSync(Buffer.from(stream, "latin1")).toString("latin1");
  } catch {
    return "";
  }
}

/** A page takes a moment to draw: the usual one is drawn once for all. */
const usualA4 = readReport(usual, LIVE, "a4");

describe("the report", () => {
  it.each(PAPERS)("is one page of %s, however much stands in it", async (paper) => {
    const box = { a4: [595.28, 841.89], letter: [612, 792] }[paper];
    for (const report of [
      await (paper === "a4" ? usualA4 : readReport(usual, LIVE, paper)),
      await readReport(crowded, REPLACED, paper),
    ]) {
      expect([report.pages, report.box]).toEqual([1, box]);
    }
  });

  it("draws the figure as paths, in the colours of the levels and of the notice", async () => {
    const { drawing } = await usualA4;
    // Deepest water and the warning's orange, as shares of one.
    const toShares = (hex: string): RegExp =>
      new RegExp(
        [1, 3, 5]
          .map((at) => (Number.parseInt(hex.slice(at, at + 2), 16) / 255).toFixed(3).slice(0, 4))
          .join("\\d* ")
          .replaceAll("0.", "0?\\."),
      );
    expect(drawing).toMatch(toShares("#144A7A"));
    // Letters of the figure are outlines: many lines and curves.
    expect((drawing.match(/ [clv]$/gm) ?? []).length).toBeGreaterThan(1000);
    expect(drawing).not.toContain("NaN");
  });

  it("is the same, byte for byte, for the same revision", async () => {
    const [first, second] = [await usualA4, await readReport(usual, LIVE, "a4")];
    const plain = (bytes: Uint8Array): string =>
      Buffer.from(bytes)
        .toString("latin1")
        .replaceAll(/\/ID \[.*?\]/g, "");
    expect(plain(first.bytes)).toBe(plain(second.bytes));
  });

  it("prints a mark for what no font has, and everything else as it is", () => {
    expect(toPrintable("Osier 8A \u2212 \u03a9 \u0416 \u6f6e\n\u00a0x")).toBe(
      "Osier 8A \u2212 \u03a9 \u0416 ?\n\u00a0x",
    );
  });
});
