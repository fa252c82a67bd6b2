/** A and C weighting against IEC 61672-1, docs/check-values.md section 1. */
import { aWeightingDb, cWeightingDb } from "../analysis/weighting";
import { toChecks, type CheckRow } from "./check";
import weighting from "./published/weighting.json";

const TABLE = "IEC 61672-1:2013, table 3 [R1]";
const FORMULA = "IEC 61672-1:2013, formula by its poles [C, R1]";
const unit = "dB";

const WORKED: Record<string, CheckRow> = {
  "a-31": {
    what: "A weighting at 31.6 Hz",
    compute: () => aWeightingDb(10 ** 1.5),
    expected: -39.4,
    tolerance: 0.05,
    unit,
    source: TABLE,
    worked: [1],
  },
  "a-1000": {
    what: "A weighting at 1 kHz",
    compute: () => aWeightingDb(1000),
    expected: 0,
    tolerance: 1e-9,
    unit,
    source: "IEC 61672-1:2013, definition [R1]",
    worked: [2],
  },
  "a-10k": {
    what: "A weighting at 10 kHz",
    compute: () => aWeightingDb(10_000),
    expected: -2.49,
    tolerance: 0.01,
    unit,
    source: FORMULA,
    worked: [2],
  },
  "c-10k": {
    what: "C weighting at 10 kHz",
    compute: () => cWeightingDb(10_000),
    expected: -4.41,
    tolerance: 0.01,
    unit,
    source: FORMULA,
    worked: [2],
  },
  "c-50": {
    what: "C weighting at 50.1 Hz",
    compute: () => cWeightingDb(10 ** 1.7),
    expected: -1.3,
    tolerance: 0.05,
    unit,
    source: TABLE,
    worked: [3],
  },
};

const table: Record<string, CheckRow> = Object.fromEntries(
  weighting.rows.flatMap((row): [string, CheckRow][] => {
    const exactHz = 1000 * 10 ** (row.n / 10);
    const at = `${row.nominal_hz} Hz`;
    const printed = { tolerance: 0.05, unit, source: TABLE, table: "table 3, printed to 0.1 dB" };
    const exact = { tolerance: 1e-4, unit, source: FORMULA, table: "formula, to four decimals" };
    const a = () => aWeightingDb(exactHz);
    const c = () => cWeightingDb(exactHz);
    return [
      [
        `table-a-${row.n}`,
        { what: `A, ${at}`, compute: a, expected: row.A_table_db, ...printed, worked: [4] },
      ],
      [
        `table-c-${row.n}`,
        { what: `C, ${at}`, compute: c, expected: row.C_table_db, ...printed, worked: [4] },
      ],
      [
        `formula-a-${row.n}`,
        { what: `A, ${at}`, compute: a, expected: row.A_formula_db, ...exact },
      ],
      [
        `formula-c-${row.n}`,
        { what: `C, ${at}`, compute: c, expected: row.C_formula_db, ...exact },
      ],
    ];
  }),
);

export const WEIGHTING_CHECKS = toChecks("weighting", { ...WORKED, ...table });
