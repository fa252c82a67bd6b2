import type { ReactNode } from "react";
import { Table, TableFrame, Td, Th } from "./table";

export interface ValuesColumn {
  key: string;
  /** With its unit: "limit, dB SPL". */
  head: string;
  /** Words stand at the left, figures at the right. */
  words?: boolean;
}

export interface ValuesRow {
  /** Unique: the band or frequency. */
  id: string | number;
  cells: Readonly<Record<string, ReactNode>>;
}

interface ValuesTableProps {
  /** What the figure shows: "Output limit by band". */
  caption: string;
  columns: readonly ValuesColumn[];
  /** One row per band or frequency; the first column is its head. */
  rows: readonly ValuesRow[];
  /** Words of the disclosure. */
  summary?: string;
}

/** Every figure has its numbers as a table, closed until asked for. */
export function ValuesTable({
  caption,
  columns,
  rows,
  summary = "Table of values",
}: ValuesTableProps) {
  const [first, ...rest] = columns;
  return (
    <details className="group mt-2">
      <summary className="inline-flex min-h-[30px] list-none items-center gap-2 text-small underline underline-offset-3 max-md:min-h-11 [&::-webkit-details-marker]:hidden">
        <svg
          className="group-open:rotate-90"
          width="7"
          height="10"
          viewBox="0 0 7 10"
          aria-hidden="true"
        >
          <path d="M1.2 1 5.4 5 1.2 9" fill="none" stroke="currentColor" strokeWidth="1.8" />
        </svg>
        {summary}
      </summary>
      <TableFrame label={caption} className="mt-2">
        <Table>
          <caption className="sr-only">{caption}</caption>
          <thead>
            <tr>
              {columns.map((column, at) => (
                <Th key={column.key} right={at > 0 && column.words !== true}>
                  {column.head}
                </Th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.id} className="hover:bg-wash">
                {first !== undefined && (
                  <th
                    scope="row"
                    className="figures border-t border-rule px-2.5 py-1.5 pl-4! text-figure font-medium whitespace-nowrap"
                  >
                    {row.cells[first.key]}
                  </th>
                )}
                {rest.map((column) => (
                  <Td key={column.key} figures right={column.words !== true} className="py-1.5!">
                    {row.cells[column.key]}
                  </Td>
                ))}
              </tr>
            ))}
          </tbody>
        </Table>
      </TableFrame>
    </details>
  );
}
