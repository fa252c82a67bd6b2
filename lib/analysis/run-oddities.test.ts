import { describe, expect, it } from "vitest";
import { runSchema } from "../series/series-schema";
import { warnOfOddRuns } from "./run-oddities";

type Stated = Record<string, unknown>;
const conditioning = { minutes: 10, crest_dB: 12, rms_re_sweep_dB: -3, gap_s: 0.5 };
const warn = (runs: Stated[]) =>
  warnOfOddRuns(runs.map((run, at) => runSchema.parse({ file: `${at}.wav`, ...run }))).map(
    ({ code, file }) => [code, file],
  );

describe("warnOfOddRuns", () => {
  it.each<[string, Stated[]]>([
    ["levels alone", [{ level_dB: 76 }, { level_dB: 86 }, { level_dB: 76, kind: "closing" }]],
    [
      "drives that rise with the levels",
      [
        { level_dB: 86, drive_dB: -10 },
        { level_dB: 76, drive_dB: -20 },
      ],
    ],
    ["repeats", [{ level_dB: 76 }, { level_dB: 76, drive_dB: 76.01 }]],
    [
      "another drive of a variant",
      [{ level_dB: 76 }, { level_dB: 76, drive_dB: 60, variant: "port blocked" }],
    ],
    ["a conditioned run", [{ level_dB: 76, kind: "long-term", conditioning }]],
  ])("says nothing of %s", (_, runs) => {
    expect(warn(runs)).toEqual([]);
  });

  it.each<[string, Stated[], [string, string]]>([
    [
      "a higher level at a lower drive",
      [
        { level_dB: 76, drive_dB: 76 },
        { level_dB: 86, drive_dB: 66 },
      ],
      ["series.drive-order", "1.wav"],
    ],
    [
      "two levels at one drive",
      [
        { level_dB: 76, drive_dB: 0 },
        { level_dB: 86, drive_dB: 0 },
      ],
      ["series.drive-order", "1.wav"],
    ],
    [
      "repeats at two drives",
      [{ level_dB: 76 }, { level_dB: 76, drive_dB: 80 }],
      ["series.drive-order", "1.wav"],
    ],
    [
      "conditioning of a short run",
      [{ level_dB: 76, conditioning }],
      ["series.conditioning-unused", "0.wav"],
    ],
    [
      "a closing run that repeats nothing",
      [{ level_dB: 76 }, { level_dB: 80, kind: "closing" }],
      ["series.closing-level", "1.wav"],
    ],
  ])("tells of %s", (_, runs, told) => {
    expect(warn(runs)).toEqual([told]);
  });
});
