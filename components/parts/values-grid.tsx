"use client";

import {
  createColumnHelper,
  createSortedRowModel,
  rowSortingFeature,
  sortFn_basic,
  tableFeatures,
  useTable,
} from "@tanstack/react-table";
import { useMemo, type ReactNode } from "react";
import { FigureDownloads } from "./figure-downloads";
import type { FigureFile } from "./figure-file";
import { SortTh, Table, TableFrame, Td } from "./table";

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

export interface ValuesGridProps {
  /** What the figure shows: "Output limit by band". */
  caption: string;
  columns: readonly ValuesColumn[];
  /** One row per band or frequency; the first column is its head. */
  rows: readonly ValuesRow[];
  /** The figure itself, to be saved as a file. */
  file?: FigureFile;
}

const features = tableFeatures({
  rowSortingFeature,
  sortedRowModel: createSortedRowModel(),
  sortFns: { basic: sortFn_basic },
});
const helper = createColumnHelper<typeof features, ValuesRow>();

/**
 * What a cell sorts by: its first number, so that "at least 102.7 dB" and "94.0" stand in order;
 * a cell without a number is undefined and stands last either way.
 */
export function toSortValue(cell: ReactNode): number | undefined {
  if (typeof cell === "number") return cell;
  if (typeof cell !== "string") return undefined;
  const found = /[−-]?\d+(?:\.\d+)?|[−-]?\.\d+/.exec(cell);
  return found === null ? undefined : Number(found[0].replace("−", "-"));
}

/** Numbers of a figure; any column sorts them. */
export function ValuesGrid({ caption, columns, rows, file }: ValuesGridProps) {
  const defined = useMemo(
    () =>
      helper.columns(
        columns.map((column, at) =>
          helper.accessor(
            (row) =>
              at === 0 && typeof row.id === "number" ? row.id : toSortValue(row.cells[column.key]),
            { id: column.key, header: column.head, sortFn: "basic", sortUndefined: "last" },
          ),
        ),
      ),
    [columns],
  );
  const data = useMemo(() => [...rows], [rows]);
  const table = useTable({ features, columns: defined, data });
  const wordsOf = new Set(columns.filter((column) => column.words).map((column) => column.key));
  return (
    <>
      {file !== undefined && <FigureDownloads file={file} columns={columns} rows={rows} />}
      <TableFrame label={caption} className="mt-2">
        <Table>
          <caption className="sr-only">{caption}</caption>
          <thead>
            {table.getHeaderGroups().map((group) => (
              <tr key={group.id}>
                {group.headers.map((header, at) => (
                  <SortTh
                    key={header.id}
                    right={at > 0 && !wordsOf.has(header.id)}
                    sorted={toDirection(header.column.getIsSorted())}
                    onSort={() => header.column.toggleSorting()}
                  >
                    {columns[at]?.head}
                  </SortTh>
                ))}
              </tr>
            ))}
          </thead>
          <tbody>
            {table.getRowModel().rows.map(({ original: row }) => (
              <tr key={row.id} className="hover:bg-wash">
                {columns.map((column, at) =>
                  at === 0 ? (
                    <th
                      key={column.key}
                      scope="row"
                      className="figures border-t border-rule px-2.5 py-1.5 pl-4! text-figure font-medium whitespace-nowrap"
                    >
                      {row.cells[column.key]}
                    </th>
                  ) : (
                    <Td key={column.key} figures right={column.words !== true} className="py-1.5!">
                      {row.cells[column.key]}
                    </Td>
                  ),
                )}
              </tr>
            ))}
          </tbody>
        </Table>
      </TableFrame>
    </>
  );
}

const toDirection = (sorted: false | "asc" | "desc"): "ascending" | "descending" | null =>
  sorted === false ? null : sorted === "asc" ? "ascending" : "descending";
