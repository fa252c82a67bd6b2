"use client";

import { ChooseBox } from "../compare/choose-box";
import { Moment } from "../frame/moment";
import { StateSquares } from "../parts/state-boxes";
import { findLimits } from "./list-words";
import { FirstCell, ReachedCell } from "./row-cells";
import { SeriesName, type RowsProps } from "./series-table";
import { SmallWall } from "./small-wall";

/** The same rows on a phone: one under the other. */
export function SeriesCards({ rows, criterionKey, chosen, onChoose }: RowsProps) {
  return (
    <ul aria-label="Series" className="border-y border-rule bg-sheet md:hidden">
      {rows.map((row) => {
        const limits = findLimits(row, criterionKey);
        return (
          <li key={row.id} className="border-t border-rule px-phone py-3.5 first:border-t-0">
            <div className="flex items-start justify-between gap-4">
              <div className="min-w-0">
                <SeriesName row={row} />
              </div>
              <p className="figures flex-none text-right text-label text-ink-2">
                {row.number}
                <br />
                <Moment at={row.changed_at} />
              </p>
            </div>
            <div className="mt-2 flex flex-wrap items-center justify-between gap-x-4">
              <StateSquares state={row.state} note={row.state_detail} />
              <ChooseBox row={row} chosen={chosen} onChoose={onChoose} worded />
            </div>
            {limits !== null && (
              <>
                <div className="mt-2.5">
                  <SmallWall limits={limits} judged />
                </div>
                <dl className="mt-2 grid grid-cols-2 gap-4">
                  <div>
                    <dt className="figures text-label text-ink-2">reached</dt>
                    <dd>
                      <ReachedCell limits={limits} unit />
                    </dd>
                  </div>
                  <div>
                    <dt className="figures text-label text-ink-2">gives out first</dt>
                    <dd>
                      <FirstCell row={row} limits={limits} />
                    </dd>
                  </div>
                </dl>
              </>
            )}
          </li>
        );
      })}
    </ul>
  );
}
