/** What the checks found, as it is printed: the page "How we measure" is made of nothing else. */
import { z } from "zod";
import { ENGINE_VERSION } from "../analysis/engine-version";
import { SUBJECTS, type CheckOutcome, type Subject } from "./check";

const rowSchema = z.strictObject({
  what: z.string(),
  /** With its unit, in so many digits as the tolerance says. */
  value: z.string(),
  expected: z.string(),
  tolerance: z.string(),
  agrees: z.boolean(),
  source: z.string(),
});

/** A whole published table in one line. */
const tableSchema = z.strictObject({
  name: z.string(),
  count: z.int().positive(),
  agreeing: z.int().nonnegative(),
  /** The row that uses most of its tolerance. */
  furthest: rowSchema,
});

export const reportSchema = z.strictObject({
  engine: z.string(),
  total: z.int().positive(),
  agreeing: z.int().nonnegative(),
  subjects: z.array(
    z.strictObject({
      name: z.string(),
      rows: z.array(rowSchema),
      tables: z.array(tableSchema),
    }),
  ),
});
export type CheckReport = z.infer<typeof reportSchema>;
export type CheckReportRow = z.infer<typeof rowSchema>;

const MINUS = "\u2212";
const MOST_DECIMALS = 9;
/** From here on a tolerance is closer than a table can say. */
const SAID_AS_POWER = 1e-6;

/** @param tolerance says how many digits are worth printing. */
export function toFigure(value: number, tolerance: number): string {
  if (!Number.isFinite(value)) return "no value";
  const decimals = Math.max(0, Math.min(MOST_DECIMALS, Math.ceil(-Math.log10(tolerance))));
  const fixed = value.toFixed(decimals);
  const short = decimals > 6 ? fixed.replace(/\.?0+$/, "") : fixed;
  return /[1-9]/.test(short) ? short.replace("-", MINUS) : short.replace("-", "");
}

const SUPERSCRIPT = "⁰¹²³⁴⁵⁶⁷⁸⁹";

function toToleranceText(tolerance: number): string {
  if (tolerance >= SAID_AS_POWER) return String(Number(tolerance.toPrecision(2)));
  const power = Math.round(-Math.log10(tolerance));
  return `10⁻${Array.from(String(power), (digit) => SUPERSCRIPT[Number(digit)]).join("")}`;
}

const withUnit = (figure: string, unit: string): string =>
  unit === "" || figure === "no value" ? figure : `${figure} ${unit}`;

export function toReportRow({ check, value, agrees }: CheckOutcome): CheckReportRow {
  const { what, expected, tolerance, unit, source } = check;
  return {
    what,
    value: withUnit(toFigure(value, tolerance), unit),
    expected: withUnit(toFigure(expected, tolerance), unit),
    tolerance: withUnit(toToleranceText(tolerance), unit),
    agrees,
    source,
  };
}

/** Share of the tolerance that is used; Infinity where there is no value. */
function toShare({ check, value }: CheckOutcome): number {
  const share = Math.abs(value - check.expected) / check.tolerance;
  return Number.isNaN(share) ? Infinity : share;
}

function toTable(name: string, outcomes: readonly CheckOutcome[]): z.infer<typeof tableSchema>[] {
  const [first, ...rest] = outcomes;
  if (first === undefined) return [];
  const furthest = rest.reduce((far, next) => (toShare(next) > toShare(far) ? next : far), first);
  const agreeing = outcomes.filter((o) => o.agrees).length;
  return [{ name, count: outcomes.length, agreeing, furthest: toReportRow(furthest) }];
}

export function toReport(outcomes: readonly CheckOutcome[]): CheckReport {
  return {
    engine: ENGINE_VERSION,
    total: outcomes.length,
    agreeing: outcomes.filter((o) => o.agrees).length,
    subjects: (Object.keys(SUBJECTS) as Subject[]).map((subject) => {
      const own = outcomes.filter((o) => o.check.subject === subject);
      const tables = new Set(own.flatMap((o) => o.check.table ?? []));
      return {
        name: SUBJECTS[subject],
        rows: own.filter((o) => o.check.table === undefined).map(toReportRow),
        tables: [...tables].flatMap((name) =>
          toTable(
            name,
            own.filter((o) => o.check.table === name),
          ),
        ),
      };
    }),
  };
}

/** The report as a file: the same outcomes, the same bytes. */
export const toReportText = (report: CheckReport): string => `${JSON.stringify(report, null, 1)}\n`;
