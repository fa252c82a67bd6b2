"use client";

import { useQuery } from "@tanstack/react-query";
import { useQueryStates } from "nuqs";
import { useState, type ReactNode } from "react";
import { ApiProblem } from "@/lib/api/client";
import type { CompareAnswer } from "@/lib/api/compare";
import { toComparisonCsv } from "@/lib/compare/compare-csv";
import { toComparisonNotice, toMethodNotes } from "@/lib/compare/compare-words";
import { MOST_COMPARED } from "@/lib/compare/comparison-schema";
import { toMethodLine } from "@/lib/exposure/notices";
import { sayCriterion } from "@/lib/result/criteria";
import type { Criterion } from "@/lib/series/series-schema";
import { PageHead } from "../frame/page-head";
import { CriterionSwitch } from "../output-limit/criterion-switch";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { SlimNotice } from "../parts/notice";
import { saveText } from "../parts/save-text";
import { SegmentedControl } from "../parts/segmented-control";
import { EmptyState, LoadingState } from "../parts/states";
import { comparisonQuery } from "../queries/compare";
import {
  compareAddress,
  toChosenIds,
  toCompareQuery,
  toReferenceFirst,
  type CompareView,
} from "./compare-address";
import { ComparisonFigure } from "./compare-figure";
import { ComparePicks } from "./compare-picks";
import { CompareTable } from "./compare-table";

const NOTHING = { series: "" };

/** Output limits of up to four series side by side; the address holds the whole choice. */
export function CompareScreen() {
  const [view, setView] = useQueryStates(compareAddress);
  const query = toCompareQuery(view);
  const compared = useQuery({ ...comparisonQuery(query ?? NOTHING), enabled: query !== null });
  const change = (next: Partial<CompareView>): void => void setView(next);
  if (query === null) return <NothingChosen />;
  if (compared.data === undefined) {
    return (
      <>
        <PageHead title="Compare output limits" />
        <Margin>
          {compared.isError ? (
            <Fault error={compared.error} onRetry={() => void compared.refetch()} />
          ) : (
            <LoadingState label="Loading the comparison" onRetry={() => void compared.refetch()} />
          )}
        </Margin>
      </>
    );
  }
  return <Compared answer={compared.data} view={view} onChange={change} />;
}

interface ComparedProps {
  answer: CompareAnswer;
  view: CompareView;
  onChange: (next: Partial<CompareView>) => void;
}

function Compared({ answer, view, onChange }: ComparedProps) {
  const ids = toChosenIds(view.series);
  const { tests, left_out: leftOut, criterion, offered } = answer;
  const notice = toComparisonNotice(tests);
  const remove = (id: string): void => onChange({ series: ids.filter((one) => one !== id) });
  return (
    <>
      <PageHead
        title="Compare output limits"
        aside={
          <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
            <CriterionSwitch
              parts={{
                thdPercents: offered.thd_percents,
                compressionDbs: offered.compressions_dB,
              }}
              criterion={criterion}
              onChange={(next) => onChange(toAddress(next))}
            />
            {offered.runs.length > 1 && (
              <SegmentedControl
                legend="runs"
                value={answer.kind}
                segments={offered.runs.map((kind) => ({ value: kind, label: kind }))}
                onChange={(runs) => onChange({ runs })}
              />
            )}
            <CopyLink />
          </div>
        }
      />
      <ComparePicks
        tests={tests}
        onReference={(id) => onChange({ series: toReferenceFirst(ids, id) })}
        onRemove={remove}
      />
      {notice !== null && (
        <Margin>
          <SlimNotice
            notice={{
              ...notice,
              text: `${notice.text} ${toMethodLine(`limit: ${sayCriterion(criterion)}`)}`,
            }}
          />
        </Margin>
      )}
      {tests.length > 0 && (
        <>
          <ComparisonFigure comparison={answer} />
          <CompareTable tests={tests} />
          <Margin>
            <div className="mt-3 flex flex-wrap items-baseline gap-x-4 gap-y-1">
              <p className="figures text-label text-ink-2">{toMethodNotes(answer)}</p>
              <Button
                tone="quiet"
                size="small"
                onClick={() => saveText("compare.csv", "text/csv", toComparisonCsv(answer))}
              >
                CSV
              </Button>
            </div>
          </Margin>
        </>
      )}
      <Margin>
        {leftOut.map((one) => (
          <p
            key={one.id}
            className="mb-2 flex flex-wrap items-baseline gap-x-3 border-l-4 border-edge bg-wash px-4 py-2.5"
          >
            <span>
              <b className="font-[680]">{one.model} was left out.</b> {one.why}
            </span>
            <Button tone="quiet" size="small" onClick={() => remove(one.id)}>
              Remove it
            </Button>
          </p>
        ))}
        {ids.length < MOST_COMPARED && (
          <p className="mt-3">
            <LinkButton href={`/series?compare=${ids.join(",")}`}>Add from the series</LinkButton>
          </p>
        )}
      </Margin>
    </>
  );
}

const Margin = ({ children }: { children: ReactNode }) => (
  <div className="px-gutter pb-3.5 max-md:px-phone">{children}</div>
);

const toAddress = ({ thd_percent, compression_dB }: Criterion): Partial<CompareView> => ({
  thd: thd_percent === undefined ? "off" : String(thd_percent),
  compression: compression_dB === undefined ? "off" : String(compression_dB),
});

/** Puts the address of this very comparison on the clipboard. */
function CopyLink() {
  const [said, setSaid] = useState<"copied" | "refused" | null>(null);
  return (
    <span className="inline-flex items-center gap-2">
      <Button
        tone="quiet"
        size="small"
        onClick={() => {
          navigator.clipboard.writeText(window.location.href).then(
            () => setSaid("copied"),
            () => setSaid("refused"),
          );
        }}
      >
        Copy link
      </Button>
      <output className="text-small text-ink-2">
        {said === "copied" && "Copied."}
        {said === "refused" && "The browser refused: copy the address above."}
      </output>
    </span>
  );
}

function NothingChosen() {
  return (
    <>
      <PageHead title="Compare output limits" />
      <Margin>
        <EmptyState
          title="Nothing chosen yet"
          actions={
            <LinkButton href="/series" tone="main">
              Choose series
            </LinkButton>
          }
        >
          Tick up to four series in the list; the first is the reference. Their limits then stand
          here side by side, with the difference in every band.
        </EmptyState>
      </Margin>
    </>
  );
}

function Fault({ error, onRetry }: { error: Error; onRetry: () => void }) {
  const problem = error instanceof ApiProblem ? error.problem : null;
  return (
    <FaultBar
      title="The comparison could not be made"
      actions={
        <>
          <Button onClick={onRetry}>Try again</Button>
          <LinkButton href="/series">Choose series</LinkButton>
        </>
      }
      {...(problem === null ? {} : { report: `report ${problem.requestId}` })}
    >
      {problem?.detail ?? "The server did not answer."}
    </FaultBar>
  );
}
