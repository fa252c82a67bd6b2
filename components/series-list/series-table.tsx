"use client";

import Link from "next/link";
import type { SeriesRow } from "@/lib/api/series";
import { Moment } from "../frame/moment";
import { SortTh, NoValue, Table, TableFrame, Td, Th, Tr } from "../parts/table";
import { StateSquares } from "../parts/state-boxes";
import { toInitialName } from "../runs/verdict-words";
import { ChooseBox } from "../compare/choose-box";
import { LevelSteps } from "./level-steps";
import type { ListView } from "./list-address";
import { findLimits } from "./list-words";
import { FirstCell, ReachedCell } from "./row-cells";
import { toRowHref } from "./row-href";
import { SmallWall } from "./small-wall";

export interface RowsProps {
  rows: readonly SeriesRow[];
  criterionKey: string;
  /** Ids in the compare tray. */
  chosen: readonly string[];
  onChoose: (id: string) => void;
}

interface SeriesTableProps extends RowsProps {
  view: Pick<ListView, "sort" | "direction">;
  onSort: (sort: ListView["sort"]) => void;
  /** An older page stands while the next one is on its way. */
  stale: boolean;
}

export function SeriesTable(props: SeriesTableProps) {
  const { rows, criterionKey, chosen, onChoose, view, onSort, stale } = props;
  const sortBy = (sort: ListView["sort"]) =>
    ({
      sorted: view.sort === sort ? (view.direction === "up" ? "ascending" : "descending") : null,
      onSort: () => onSort(sort),
    }) as const;
  return (
    <TableFrame label="Series" className="max-md:hidden">
      <Table className="border-x-0 border-b" aria-busy={stale || undefined}>
        <caption className="sr-only">Series of the lab</caption>
        <thead>
          <tr>
            <Th className="w-[17px] pr-0! pl-gutter!">
              <span className="sr-only">Compare</span>
            </Th>
            <SortTh {...sortBy("name")} className="pl-3.5!">
              Loudspeaker
            </SortTh>
            <SortTh {...sortBy("number")}>Series</SortTh>
            <SortTh {...sortBy("state")}>State</SortTh>
            <Th>Levels</Th>
            <Th>Output limit, 60 to 106 dB</Th>
            <SortTh {...sortBy("reached")}>Reached, dB</SortTh>
            <Th>Gives out first</Th>
            <Th>With</Th>
            <SortTh {...sortBy("changed")} className="pr-gutter!">
              Last change
            </SortTh>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => {
            const limits = findLimits(row, criterionKey);
            return (
              <Tr key={row.id} height="list" selected={chosen.includes(row.id)}>
                <Td className="pr-0! pl-gutter!">
                  <ChooseBox row={row} chosen={chosen} onChoose={onChoose} />
                </Td>
                <Td className="pl-3.5!">
                  <SeriesName row={row} />
                </Td>
                <Td figures>{row.number}</Td>
                <Td>
                  <StateSquares state={row.state} note={row.state_detail} />
                </Td>
                <Td>
                  <LevelSteps levelsDb={row.levels_dB} />
                </Td>
                <Td>
                  <SmallWall limits={limits} judged={row.limits.length > 0} />
                </Td>
                <Td>
                  <ReachedCell limits={limits} />
                </Td>
                <Td>
                  <FirstCell row={row} limits={limits} />
                </Td>
                <Td className="text-small whitespace-nowrap">
                  {row.with === null ? <NoValue say="nobody" /> : toInitialName(row.with.name)}
                </Td>
                <Td figures className="pr-gutter!">
                  <Moment at={row.changed_at} />
                </Td>
              </Tr>
            );
          })}
        </tbody>
      </Table>
    </TableFrame>
  );
}

export function SeriesName({ row }: { row: SeriesRow }) {
  return (
    <>
      <Link
        href={toRowHref(row)}
        className="block text-[16px]/5 font-[680] no-underline hover:underline"
      >
        {row.loudspeaker.model}
      </Link>
      <span className="block text-[13px]/[18px] text-ink-2">
        {row.loudspeaker.maker}, {row.loudspeaker.kind}
      </span>
    </>
  );
}
