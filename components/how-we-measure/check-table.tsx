import { Fragment } from "react";
import type { CheckReport, CheckReportRow } from "@/lib/checks/report";
import { joinClasses } from "../parts/join-classes";
import { VerdictMark } from "../parts/verdict";

const CELL = "border-b border-rule py-[9px] pr-5 align-baseline max-md:border-0 max-md:py-0.5";
const FIGURE = `${CELL} figures text-right text-[15px] whitespace-nowrap max-md:pr-2 max-md:text-left max-md:text-figure`;

const HEADS = ["Check", "Our value", "Expected", "Tolerance", "", "Source"];

/** Value, expected, tolerance and source of every check. On a phone a check is three lines. */
export function CheckTable({ subjects }: Pick<CheckReport, "subjects">) {
  return (
    <table className="mt-[22px] w-full border-collapse text-left text-[16px]/[22px] max-md:block">
      <thead className="max-md:sr-only">
        <tr>
          {HEADS.map((head, i) => (
            <th
              key={head}
              scope="col"
              className={joinClasses(
                "figures border-b border-ink py-2 pr-5 text-hint font-medium text-ink-2",
                i > 0 && i < 4 && "text-right whitespace-nowrap",
              )}
            >
              {head === "" ? <span className="sr-only">Verdict</span> : head}
            </th>
          ))}
        </tr>
      </thead>
      {subjects.map(({ name, rows, tables }) => (
        <tbody key={name} className="max-md:block">
          <tr className="max-md:block">
            <th
              scope="rowgroup"
              colSpan={6}
              className="border-b border-edge pt-[22px] pb-[9px] font-[680] max-md:block"
            >
              {name}
            </th>
          </tr>
          {rows.map((row) => (
            <CheckRow key={`${row.what}${row.expected}`} row={row} />
          ))}
          {tables.map(({ name: table, count, agreeing, furthest }) => (
            <Fragment key={table}>
              <tr className="max-md:block">
                <td
                  colSpan={6}
                  className="pt-3 text-ink-2 max-md:block max-md:border-t max-md:border-rule"
                >
                  {agreeing} of {count} values agree: {table}. The furthest off:
                </td>
              </tr>
              <CheckRow row={furthest} />
            </Fragment>
          ))}
        </tbody>
      ))}
    </table>
  );
}

function CheckRow({ row }: { row: CheckReportRow }) {
  return (
    <tr className="max-md:flex max-md:flex-wrap max-md:gap-x-2 max-md:border-b max-md:border-rule max-md:py-2">
      <td className={joinClasses(CELL, "max-md:w-full max-md:pr-0")}>{row.what}</td>
      <td className={FIGURE}>{row.value}</td>
      <td className={FIGURE}>
        <span className="text-ink-2 md:hidden">due </span>
        {row.expected}
      </td>
      <td className={FIGURE}>
        <span className="text-ink-2 md:hidden">± </span>
        {row.tolerance}
      </td>
      <td className={joinClasses(CELL, row.agrees ? "" : "text-fault")}>
        <VerdictMark
          kind={row.agrees ? "ok" : "bad"}
          label={row.agrees ? "agrees" : "does not agree"}
        />
      </td>
      <td className={joinClasses(CELL, "text-[15px] text-ink-2 max-md:w-full max-md:text-small")}>
        {row.source}
      </td>
    </tr>
  );
}
