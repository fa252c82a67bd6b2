/** Fractional-octave bands against IEC 61260-1 and ISO 266, docs/check-values.md section 2. */
import { thirdOctave, thirdOctaves, twentyFourthOctaves } from "../analysis/bands";
import { toChecks, type CheckRow } from "./check";
import bands from "./published/bands.json";

const BASE_TEN = "IEC 61260-1:2014, base ten [M, C]";
const unit = "Hz";

/** Mid-band frequency of the 1/24 octave that holds a frequency. */
function twentyFourthAt(frequencyHz: number): number {
  const { edgeHz, centreHz } = twentyFourthOctaves(20, 20_000);
  return centreHz[edgeHz.findIndex((edge) => edge > frequencyHz) - 1] ?? Number.NaN;
}

const WORKED: Record<string, CheckRow> = {
  "lower-edge-1000": {
    what: "lower edge of the 1 kHz band",
    compute: () => thirdOctave(0).lowHz,
    expected: 891.251,
    tolerance: 0.001,
    unit,
    source: BASE_TEN,
    worked: [6],
  },
  "upper-edge-1000": {
    what: "upper edge of the 1 kHz band",
    compute: () => thirdOctave(0).highHz,
    expected: 1122.018,
    tolerance: 0.001,
    unit,
    source: BASE_TEN,
    worked: [6],
  },
  "centre-1250": {
    what: "exact centre of the 1.25 kHz band",
    compute: () => thirdOctave(1).exactHz,
    expected: 1258.925,
    tolerance: 0.001,
    unit,
    source: "IEC 61260-1:2014; name by ISO 266 [M, C]",
    worked: [6],
  },
  "centre-20": {
    what: "exact centre of the 20 Hz band",
    compute: () => thirdOctave(-17).exactHz,
    expected: 19.953,
    tolerance: 0.001,
    unit,
    source: BASE_TEN,
    worked: [7],
  },
  "lower-edge-20": {
    what: "lower edge of the 20 Hz band",
    compute: () => thirdOctave(-17).lowHz,
    expected: 17.783,
    tolerance: 0.001,
    unit,
    source: BASE_TEN,
    worked: [7],
  },
  "upper-edge-20k": {
    what: "upper edge of the 20 kHz band",
    compute: () => thirdOctave(13).highHz,
    expected: 22_387.2,
    tolerance: 0.1,
    unit,
    source: BASE_TEN,
    worked: [7],
  },
  "twenty-fourth-41": {
    what: "1/24 octave that holds 41.5 Hz: its centre",
    compute: () => twentyFourthAt(41.5),
    expected: 41.567,
    tolerance: 0.001,
    unit,
    source: "IEC 61260-1:2014, annex E [R4]",
  },
  "twenty-fourth-8800": {
    what: "1/24 octave that holds 8.8 kHz: its centre",
    compute: () => twentyFourthAt(8800),
    expected: 8785.2,
    tolerance: 0.1,
    unit,
    source: "IEC 61260-1:2014, annex E [R4]",
  },
  "bands-of-a-sweep": {
    what: "bands that a sweep from 20 Hz to 20 kHz measures",
    compute: () => thirdOctaves(20, 20_000).length,
    expected: 27,
    tolerance: 1e-9,
    unit: "",
    source: "40 Hz to 16 kHz: docs/domain.md section 3 [C]",
  },
};

const table: Record<string, CheckRow> = Object.fromEntries(
  bands.third_octave.flatMap((row): [string, CheckRow][] => {
    // Printed to four decimals.
    const exact = { tolerance: 1e-4, unit, source: BASE_TEN, table: "centres and edges" };
    const name = `band of ${row.nominal_hz} Hz`;
    return [
      [
        `centre-of-${row.n}`,
        {
          what: `${name}, centre`,
          compute: () => thirdOctave(row.n).exactHz,
          expected: row.exact_hz,
          ...exact,
        },
      ],
      [
        `low-of-${row.n}`,
        {
          what: `${name}, lower edge`,
          compute: () => thirdOctave(row.n).lowHz,
          expected: row.lower_hz,
          ...exact,
        },
      ],
      [
        `high-of-${row.n}`,
        {
          what: `${name}, upper edge`,
          compute: () => thirdOctave(row.n).highHz,
          expected: row.upper_hz,
          ...exact,
        },
      ],
      [
        `name-of-${row.n}`,
        {
          what: `${name}: its name by the exact ${row.exact_hz} Hz`,
          compute: () => thirdOctave(row.n).nominalHz,
          expected: row.nominal_hz,
          tolerance: 1e-9,
          unit,
          source: "ISO 266:1997 nominal numbers [R1]",
          table: "names of the bands",
        },
      ],
    ];
  }),
);

export const BAND_CHECKS = toChecks("bands", { ...WORKED, ...table });
