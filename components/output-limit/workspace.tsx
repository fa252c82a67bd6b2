"use client";

import dynamic from "next/dynamic";
import { parseAsFloat, parseAsString, useQueryStates } from "nuqs";
import { useLayoutEffect, useMemo, useRef, useState, type KeyboardEvent } from "react";
import type { Review } from "@/lib/api/review";
import type { SeriesView } from "@/lib/api/series";
import { listCriterionParts, readCriterion, sayCriterion } from "@/lib/result/criteria";
import type { Result } from "@/lib/result/result-schema";
import type { Criterion } from "@/lib/series/series-schema";
import { DECIDABLE_CAUSES } from "@/lib/series/vocabulary";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { ConflictView } from "../review/conflict-view";
import { ReviewFoot } from "../review/review-foot";
import { ReviewPane } from "../review/review-pane";
import { countReview, findNextOpen, toBandDecisions, toRange } from "../review/review-state";
import { useDecisions } from "../review/use-decisions";
import { VersionNotice } from "../review/version-notice";
import { WaitingBar } from "../review/waiting-bar";
import { BandDetail } from "./band-detail";
import { CriterionSwitch } from "./criterion-switch";
import { HeadlineLine } from "./headline-line";
import { InputOutput } from "./input-output";
import { OutputLimitFigure } from "./output-limit-figure";
import { ResultNotes } from "./result-notes";
import { useSelection } from "./use-selection";

/** Comes with the question. */
const AskRunDialog = dynamic(() => import("../review/ask-run-dialog").then((m) => m.AskRunDialog));

interface WorkspaceProps {
  series: SeriesView;
  result: Result;
  review: Review;
  version: number;
  /** The newest analysis is done and nothing is under way. */
  watched: boolean;
  mayDecide: boolean;
  /** Switches between the signed version and a newer one. */
  onShowSigned: (on: boolean) => void;
}

/** The finding of every band, and what people decided on it. */
export function Workspace({
  series,
  result,
  review,
  version,
  watched,
  mayDecide,
  onShowSigned,
}: WorkspaceProps) {
  const parts = listCriterionParts(result.settings.criteria);
  const [address, setAddress] = useQueryStates(
    { thd: parseAsString, compression: parseAsString, band: parseAsFloat },
    { history: "replace" },
  );
  // Columns rise once for an analysis that was finished while the page stood open.
  const [firstVersion] = useState(version);
  const criterion = readCriterion(parts, address);
  const [asking, setAsking] = useState(false);
  const place = useRef<HTMLDivElement>(null);
  // The address follows the selection; it may lag behind, and a key must never meet another band.
  const [bandHz, setBandHz] = useState(address.band);
  const band =
    result.bands.find((one) => one.nominal_Hz === bandHz) ?? pickFirstBand(result, criterion);
  const selection = useSelection(band?.nominal_Hz ?? null, (hz) => {
    setBandHz(hz);
    void setAddress({ band: hz });
  });
  const decisions = useDecisions({
    seriesId: series.id,
    analysisId: review.analysis_id,
    review,
    bands: result.bands,
  });
  const { shown } = decisions;
  const marks = useMemo(() => toBandDecisions(shown), [shown]);
  const count = useMemo(() => countReview(result.bands, shown), [result.bands, shown]);
  const isNewest = series.latest_done_analysis?.id === review.analysis_id;
  const open = mayDecide && isNewest && review.sign_off === null && series.archived_at === null;

  // What moves the selection from outside the wall takes the focus of the wall along.
  const [wallFocus, setWallFocus] = useState(0);
  useLayoutEffect(() => {
    if (wallFocus === 0) return;
    place.current
      ?.querySelector<SVGGElement>(`[role="button"][data-band="${selection.hz ?? ""}"]`)
      ?.focus();
    // Only a new request moves the focus.
    // oxlint-disable-next-line react-hooks/exhaustive-deps
  }, [wallFocus]);
  const toWall = (): void => setWallFocus((n) => n + 1);

  const onCriterion = (next: Criterion): void => {
    void setAddress({
      thd: next.thd_percent === undefined ? "off" : String(next.thd_percent),
      compression: next.compression_dB === undefined ? "off" : String(next.compression_dB),
    });
  };
  const next = (): void => {
    const hz = findNextOpen(result.bands, shown, selection.topHz);
    if (hz !== null) selection.select(hz);
  };
  const undo = (): void => {
    const [hz] = decisions.undo() ?? [];
    if (hz !== undefined) selection.select(hz);
  };
  const confirmAll = (): void => {
    decisions.decide(
      count.openWithoutFinding.map(({ nominal_Hz }) => ({
        nominal_Hz,
        cause: "none",
        reason: null,
      })),
    );
    // The button goes; the keyboard stays at work.
    toWall();
  };
  /** The keys of the wall, for wherever the focus stands in the workspace. */
  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.defaultPrevented || isTyping(event.target) || !open) return;
    const key = event.key.toLowerCase();
    if ((event.ctrlKey || event.metaKey) && key === "z" && !event.shiftKey) undo();
    else if (event.ctrlKey || event.metaKey || event.altKey) return;
    else if (key === "n") next();
    else {
      const cause = DECIDABLE_CAUSES[Number(key) - 1];
      if (cause === undefined) return;
      selection.pick(cause);
      selection.askFocus();
    }
    event.preventDefault();
  };
  const range = band === undefined ? [] : toRange(result.bands, selection.fromHz, selection.toHz);
  return (
    // Single keys decide, wherever in the workspace the focus stands.
    // oxlint-disable-next-line jsx-a11y/no-static-element-interactions
    <div className="mt-4" ref={place} onKeyDown={onKeyDown}>
      <WaitingBar outbox={decisions.outbox} onRetry={decisions.retry} />
      {decisions.outbox.conflict !== null && (
        <ConflictView
          conflict={decisions.outbox.conflict}
          bands={result.bands}
          onKeepTheirs={decisions.keepTheirs}
          onTakeMine={decisions.takeMine}
        />
      )}
      {decisions.outbox.fault !== null && (
        <FaultBar
          className="mt-4"
          title="A decision was not taken"
          actions={<Button onClick={decisions.dismissFault}>Dismiss</Button>}
        >
          {decisions.outbox.fault}
        </FaultBar>
      )}
      <VersionNotice
        series={series}
        review={review}
        version={version}
        isNewest={isNewest}
        openHz={[...count.openWithFinding, ...count.openWithoutFinding].map((b) => b.nominal_Hz)}
        mayKeep={open}
        onShowSigned={onShowSigned}
      />
      <div className="mt-4 flex flex-wrap items-end justify-between gap-x-8 gap-y-3">
        <HeadlineLine result={result} criterion={criterion} />
        <CriterionSwitch parts={parts} criterion={criterion} onChange={onCriterion} />
      </div>
      <div className="mt-3 grid gap-x-6 gap-y-6 xl:grid-cols-[minmax(0,1fr)_364px]">
        <div className="min-w-0">
          <OutputLimitFigure
            result={result}
            criterion={criterion}
            decisions={marks}
            selectedHz={selection.hz}
            onSelect={selection.select}
            rise={watched && version !== firstVersion}
            {...(open
              ? {
                  range: new Set(range.map((one) => one.nominal_Hz)),
                  onExtend: selection.extend,
                  onEnter: selection.askFocus,
                  onCause: selection.pick,
                  onNextOpen: () => {
                    next();
                    toWall();
                  },
                }
              : {})}
          />
          <ReviewFoot
            seriesId={series.id}
            version={version}
            criterion={criterion}
            review={review}
            count={count}
            waiting={decisions.outbox.acts.length}
            mayDecide={open}
            mayReopen={mayDecide && series.archived_at === null}
            onConfirmAll={confirmAll}
          />
          <ResultNotes result={result} />
          <p className="figures mt-4 text-label text-ink-2">
            analysis version {version}, engine {result.engine.version}, {sayCriterion(criterion)}
          </p>
        </div>
        {band !== undefined && (
          <aside aria-label="Selected band" className="min-w-0 xl:border-l xl:border-rule xl:pl-5">
            <BandDetail
              result={result}
              band={band}
              criterion={criterion}
              onMove={selection.select}
              figure={<InputOutput result={result} band={band} />}
              decision={
                <ReviewPane
                  seriesId={series.id}
                  review={review}
                  open={open}
                  mayDecide={mayDecide}
                  result={result}
                  criterion={criterion}
                  bands={range}
                  band={band}
                  decisions={decisions}
                  picked={selection.picked}
                  focusCount={selection.focusCount}
                  onPick={selection.pick}
                  onNext={next}
                  onBack={toWall}
                  onAskForRun={() => setAsking(true)}
                  onUndo={undo}
                />
              }
            />
          </aside>
        )}
      </div>
      {asking && band !== undefined && (
        <AskRunDialog series={series} band={band} onClose={() => setAsking(false)} />
      )}
    </div>
  );
}

const isTyping = (target: EventTarget): boolean =>
  target instanceof HTMLElement && target.closest("input, textarea, select") !== null;

/** The band that gives out first, else the lowest one: where a person wants to look. */
function pickFirstBand(result: Result, criterion: Criterion) {
  const headline = result.headline.find(
    (one) =>
      one.criterion.thd_percent === criterion.thd_percent &&
      one.criterion.compression_dB === criterion.compression_dB,
  );
  const hz = headline?.first?.nominal_Hz;
  return result.bands.find((one) => one.nominal_Hz === hz) ?? result.bands[0];
}
