/** Programme spectra, docs/check-values.md section 8. */
import { thirdOctaves } from "../analysis/bands";
import { programmeBandDb, sumLevelsDb, type ProgrammeSpectrum } from "../analysis/programme";
import { aWeightingDb, cWeightingDb } from "../analysis/weighting";
import { toChecks, type CheckRow } from "./check";
import bands from "./published/bands.json";

/** 20 Hz to 20 kHz: 31 bands. */
const ALL = thirdOctaves(10, 22_400);
const IEC = "IEC 60268-1:1985, clause 7, table II [R3]";
const NAMES: Record<ProgrammeSpectrum, string> = {
  pink: "31 bands of pink noise",
  "iec-60268-1": "simulated programme of IEC 60268-1",
};

const levels = (spectrum: ProgrammeSpectrum): number[] =>
  ALL.map(({ nominalHz }) => programmeBandDb(spectrum, nominalHz));
const sum = (spectrum: ProgrammeSpectrum, weight: (hz: number) => number = () => 0): number =>
  sumLevelsDb(levels(spectrum).map((db, b) => db + weight(ALL[b]?.exactHz ?? Number.NaN)));

const SUMS = [
  ["pink", 14.91, -2.98, -1.23],
  ["iec-60268-1", 12.56, -2.6, -0.31],
] as const;

const sums: [string, CheckRow][] = SUMS.flatMap(([spectrum, total, a, c]) => {
  const source =
    spectrum === "pink"
      ? "equal level in every third octave [C]"
      : "sum of IEC 60268-1:1985, table II [R3, C]";
  const row = (what: string, compute: () => number, expected: number): CheckRow => ({
    what: `${NAMES[spectrum]}: ${what}`,
    compute,
    expected,
    tolerance: 0.02,
    unit: "dB",
    source,
    worked: spectrum === "pink" ? [] : [47],
  });
  return [
    [`${spectrum}-sum`, row("sum re one band at 0 dB", () => sum(spectrum), total)],
    [
      `${spectrum}-a`,
      row("A less unweighted", () => sum(spectrum, aWeightingDb) - sum(spectrum), a),
    ],
    [
      `${spectrum}-c`,
      row("C less unweighted", () => sum(spectrum, cWeightingDb) - sum(spectrum), c),
    ],
  ];
});

const table: [string, CheckRow][] = bands.third_octave.map((row) => [
  `iec-${row.n}`,
  {
    what: `${NAMES["iec-60268-1"]} in the band of ${row.nominal_hz} Hz`,
    compute: () => programmeBandDb("iec-60268-1", row.nominal_hz),
    expected: row.iec60268_1_programme_rel_db,
    tolerance: 0.05,
    unit: "dB",
    source: IEC,
    table: "table II of IEC 60268-1",
  },
]);

export const PROGRAMME_CHECKS = toChecks("programme", {
  ...Object.fromEntries(sums),
  "pink-80": {
    what: "31 pink bands at 80.0 dB",
    compute: () => 80 + sum("pink"),
    expected: 94.91,
    tolerance: 0.02,
    unit: "dB",
    source: "equal level in every third octave [C]",
    worked: [48],
  },
  "pink-80-a": {
    what: "31 pink bands at 80.0 dB, A-weighted",
    compute: () => 80 + sum("pink", aWeightingDb),
    expected: 91.94,
    tolerance: 0.02,
    unit: "dB(A)",
    source: "equal level in every third octave [C]",
    worked: [48],
  },
  ...Object.fromEntries(table),
});
