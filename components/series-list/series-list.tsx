"use client";

import { useQuery } from "@tanstack/react-query";
import { useQueryStates } from "nuqs";
import { useCallback } from "react";
import { ApiProblem } from "@/lib/api/client";
import type { SeriesRow } from "@/lib/api/series";
import { formatCount } from "@/lib/charts/format";
import { toMaxLevelNotice } from "@/lib/exposure/notices";
import { toCriterionKey } from "@/lib/result/criteria";
import { toChosenIds, toggleChosen } from "../compare/compare-address";
import { CompareTray } from "../compare/compare-tray";
import { PageHead } from "../frame/page-head";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { SlimNotice } from "../parts/notice";
import { EmptyState, LoadingState } from "../parts/states";
import { saveText } from "../parts/save-text";
import { seriesListQuery } from "../queries/series";
import { EmptyWall } from "../output-limit/empty-wall";
import {
  listAddress,
  NO_FILTERS,
  toFilterWords,
  toListQuery,
  toSort,
  type ListView,
} from "./list-address";
import { DEFAULT_CRITERION, listCriteria, toCriterionWords } from "./list-words";
import { PageTurner } from "./page-turner";
import { SeriesCards } from "./series-cards";
import { toLoudestLevel, toSeriesCsv } from "./series-csv";
import { SeriesFilters } from "./series-filters";
import { SeriesTable } from "./series-table";

const NO_ROWS: readonly SeriesRow[] = [];
const NO_COUNTS = {};

/** The series of the lab: filtered, sorted and searched by the address. */
export function SeriesList({ mayCapture }: { mayCapture: boolean }) {
  const [view, setView] = useQueryStates(listAddress);
  const list = useQuery(seriesListQuery(toListQuery(view)));
  const change = useCallback(
    (next: Partial<ListView>) => {
      void setView(next);
    },
    [setView],
  );
  const rows = list.data?.series ?? NO_ROWS;
  const criteria = listCriteria(rows);
  const criterion = criteria.find((c) => toCriterionKey(c) === view.criterion) ?? DEFAULT_CRITERION;
  const chosen = toChosenIds(view.compare);
  const onChoose = (id: string): void => change({ compare: toggleChosen(chosen, id) });
  const nothingYet = list.data !== undefined && list.data.total === 0 && view.archived === "no";

  return (
    <>
      <PageHead
        title="Series"
        line={
          list.data === undefined || nothingYet
            ? undefined
            : `${formatCount(list.data.total)} series · ${formatCount(rows.length)} shown · limits for ${toCriterionWords(criterion)}, short-term, at 1 m`
        }
        aside={
          mayCapture &&
          !nothingYet && (
            <LinkButton href="/series/new" tone="main">
              New series
            </LinkButton>
          )
        }
      />
      <ListNotice rows={rows} />
      {nothingYet ? (
        <NothingYet mayCapture={mayCapture} />
      ) : (
        <>
          <SeriesFilters
            view={view}
            byState={list.data?.by_state ?? NO_COUNTS}
            criteria={criteria}
            onChange={change}
            onCsv={
              rows.length === 0
                ? undefined
                : () => saveText("series.csv", "text/csv", toSeriesCsv(rows, criterion))
            }
          />
          {list.isError && list.data === undefined ? (
            <ListFault error={list.error} onRetry={() => void list.refetch()} />
          ) : (
            <>
              {rows.length > 0 && (
                <>
                  <SeriesTable
                    rows={rows}
                    criterionKey={toCriterionKey(criterion)}
                    chosen={chosen}
                    onChoose={onChoose}
                    view={view}
                    onSort={(sort) => change(toSort(view, sort))}
                    stale={list.isPlaceholderData}
                  />
                  <SeriesCards
                    rows={rows}
                    criterionKey={toCriterionKey(criterion)}
                    chosen={chosen}
                    onChoose={onChoose}
                  />
                </>
              )}
              {list.isPending && (
                <div className="px-gutter py-4 max-md:px-phone">
                  <LoadingState label="Loading the series" onRetry={() => void list.refetch()} />
                </div>
              )}
              {list.data !== undefined && rows.length === 0 && (
                <NothingFound
                  view={view}
                  total={list.data.total}
                  found={list.data.found}
                  onClear={() => void setView(NO_FILTERS)}
                  onClearName={() => change({ search: "", page: 1 })}
                />
              )}
              {list.data !== undefined && (
                <PageTurner
                  page={view.page}
                  found={list.data.found}
                  onTurn={(page) => change({ page })}
                />
              )}
            </>
          )}
        </>
      )}
      {chosen.length > 0 && (
        <CompareTray
          chosen={chosen}
          rows={rows}
          onRemove={onChoose}
          onClear={() => change({ compare: [] })}
        />
      )}
    </>
  );
}

/** Once in the view, as soon as one row shows a level. */
function ListNotice({ rows }: { rows: readonly SeriesRow[] }) {
  const levelDb = toLoudestLevel(rows);
  if (levelDb === null) return null;
  const stage = rows.some((row) => row.loudspeaker.kind.includes("stage"));
  const notice = toMaxLevelNotice({ levelDb, distanceM: 1, stage, mayPlayLouder: true });
  return (
    <div className="px-gutter pb-3 max-md:px-phone">
      <SlimNotice notice={{ ...notice, text: `${notice.text} ${notice.method}` }} />
    </div>
  );
}

function NothingYet({ mayCapture }: { mayCapture: boolean }) {
  return (
    <div className="px-gutter pb-8 max-md:px-phone">
      <EmptyState
        title="No series yet"
        figure={<EmptyWall />}
        actions={
          mayCapture && (
            <LinkButton href="/series/new" tone="main">
              New series
            </LinkButton>
          )
        }
      >
        A series holds every run of one loudspeaker, from the first sweep to the published page.
        {!mayCapture && " A tester starts a series."}
      </EmptyState>
    </div>
  );
}

interface NothingFoundProps {
  view: ListView;
  total: number;
  found: number;
  onClear: () => void;
  onClearName: () => void;
}

function NothingFound({ view, total, found, onClear, onClearName }: NothingFoundProps) {
  const filters = toFilterWords(view);
  const named = view.search !== "";
  if (found > 0) {
    return (
      <div className="px-gutter py-4 max-md:px-phone">
        <EmptyState
          title={`There is no page ${view.page}`}
          actions={<Button onClick={onClear}>To the first page</Button>}
        >
          {formatCount(found)} series match.
        </EmptyState>
      </div>
    );
  }
  return (
    <div className="px-gutter py-4 max-md:px-phone">
      <EmptyState
        title={named ? `No series matches “${view.search}”` : "No series matches"}
        actions={
          <>
            <Button onClick={onClear}>Clear filters</Button>
            {named && filters.length > 0 && (
              <Button tone="quiet" onClick={onClearName}>
                Clear only the name
              </Button>
            )}
          </>
        }
      >
        {filters.length > 0 && <>Filters on: {filters.join(", ")}. </>}
        {formatCount(total)} series are hidden by them.
      </EmptyState>
    </div>
  );
}

function ListFault({ error, onRetry }: { error: Error; onRetry: () => void }) {
  const report = error instanceof ApiProblem ? error.problem.requestId : "";
  return (
    <div className="px-gutter py-4 max-md:px-phone">
      <FaultBar
        title="The list could not be read"
        actions={<Button onClick={onRetry}>Try again</Button>}
        {...(report === "" ? {} : { report: `report ${report}` })}
      >
        {error.message}
      </FaultBar>
    </div>
  );
}
