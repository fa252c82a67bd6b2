"use client";

import {
  useEffect,
  useId,
  useLayoutEffect,
  useRef,
  useState,
  type FormEvent,
  type KeyboardEvent,
} from "react";
import { formatFrequency } from "@/lib/charts/format";
import { CAUSE_WORDS } from "@/lib/charts/marks";
import type { Band, Result } from "@/lib/result/result-schema";
import { needsReason, SHORTEST_REASON } from "@/lib/review/decide";
import type { DecisionCause } from "@/lib/review/review-schema";
import type { Criterion } from "@/lib/series/series-schema";
import { Button } from "../parts/button";
import { Field, TextInput } from "../parts/field";
import { Kbd } from "../parts/kbd";
import { CauseChoice } from "./cause-choice";
import { DecisionLine } from "./decision-line";
import { toComputedCause } from "./review-state";
import type { BandChoice, Decisions } from "./use-decisions";

export interface DecisionPanelProps {
  result: Result;
  criterion: Criterion;
  /** The selected band, or all of a range; rising frequency. */
  bands: readonly Band[];
  decisions: Decisions;
  /** Picked by key or press; null: as computed. */
  picked: DecisionCause | null;
  onPick: (cause: DecisionCause | null) => void;
  /** After a decision, and for Skip: on to the next open band. */
  onNext: () => void;
  /** Esc: back to the wall. */
  onBack: () => void;
  onAskForRun: () => void;
  onUndo: () => void;
}

/** Counts up when the keyboard should come to the decision. */
export interface FocusRequest {
  focusCount: number;
}

/** What a person decides on a band, or on a range of them at once. */
export function DecisionPanel({
  result,
  criterion,
  bands,
  decisions,
  picked,
  onPick,
  onNext,
  onBack,
  onAskForRun,
  onUndo,
  focusCount,
}: DecisionPanelProps & FocusRequest) {
  const [reason, setReason] = useState("");
  const [fault, setFault] = useState<string>();
  const confirmRef = useRef<HTMLButtonElement>(null);
  const reasonRef = useRef<HTMLInputElement>(null);
  const headId = useId();
  const [first] = bands;
  const single = bands.length === 1 ? first : undefined;
  const computed = bands.map((band) => toComputedCause(result, band, criterion));
  const standing = single === undefined ? undefined : decisions.shown.get(single.nominal_Hz);
  const cause = picked ?? standing?.cause ?? (single === undefined ? null : (computed[0] ?? null));
  const reasonNeeded = cause !== null && bands.some((band) => needsReason(band, cause));

  // Before the next key can come.
  useLayoutEffect(() => {
    if (focusCount === 0) return;
    (reasonNeeded ? reasonRef.current : confirmRef.current)?.focus();
    // Only a new request moves the focus.
    // oxlint-disable-next-line react-hooks/exhaustive-deps
  }, [focusCount]);

  const standingReason = standing?.reason ?? "";
  const place = bands.map((band) => band.nominal_Hz).join(" ");
  useEffect(() => {
    setReason(standingReason);
    setFault(undefined);
  }, [place, standingReason]);

  const confirm = (event: FormEvent): void => {
    event.preventDefault();
    const words = reason.trim();
    if (reasonNeeded && words.length < SHORTEST_REASON) {
      setFault("Give a reason: it stands beside the decision.");
      reasonRef.current?.focus();
      return;
    }
    decisions.decide(
      bands.map((band, at): BandChoice => ({
        nominal_Hz: band.nominal_Hz,
        cause: cause ?? computed[at] ?? band.cause,
        reason: words === "" ? null : words,
      })),
    );
    confirmRef.current?.focus();
    onNext();
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.key !== "Escape") return;
    event.preventDefault();
    onBack();
  };
  const head =
    single === undefined ? `What holds these ${bands.length} bands back?` : "What holds it back?";
  return (
    // Esc leaves the form for the wall, wherever in it the focus stands.
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
    <form
      aria-labelledby={headId}
      onSubmit={confirm}
      onKeyDown={onKeyDown}
      className="border-t-[3px] border-overprint pt-3"
    >
      <div className="mb-2 flex flex-wrap items-baseline justify-between gap-x-4">
        <h3 id={headId}>{head}</h3>
        <span className="figures text-label text-ink-2">{sayComputed(computed)}</span>
      </div>
      {single === undefined ? (
        <p className="mb-2 text-small text-ink-2">
          {formatFrequency(first?.nominal_Hz ?? 0)} to{" "}
          {formatFrequency(bands.at(-1)?.nominal_Hz ?? 0)}
        </p>
      ) : (
        <DecisionLine decision={standing} />
      )}
      <CauseChoice
        picked={cause}
        withDistortionOnly={single !== undefined && computed[0] === "distortion only"}
        onPick={onPick}
      />
      <Field
        className="mt-2.5"
        label={reasonNeeded ? "reason, needed for this change" : "reason, needed only for a change"}
        error={fault}
      >
        {(control) => (
          <TextInput
            {...control}
            ref={reasonRef}
            size="normal"
            maxLength={500}
            value={reason}
            aria-required={reasonNeeded}
            onChange={(event) => {
              setReason(event.target.value);
              setFault(undefined);
            }}
          />
        )}
      </Field>
      <div className="mt-3 flex flex-wrap items-center gap-2">
        <Button
          type="submit"
          tone="decision"
          // A key that is held down confirms one band, not all.
          onKeyDown={(event) => event.repeat && event.preventDefault()}
          className="gap-2.5"
          ref={confirmRef}
        >
          {toConfirmWords(cause, reasonNeeded, bands.length)} <Kbd plain>Enter</Kbd>
        </Button>
        <Button onClick={onNext} aria-keyshortcuts="N">
          Skip
        </Button>
        <Button className="ml-auto" onClick={onAskForRun}>
          Ask for a run
        </Button>
      </div>
      <p className="mt-2 flex min-h-[30px] items-center gap-2 text-small text-ink-2">
        {decisions.mayUndo && (
          <Button tone="quiet" size="small" onClick={onUndo} aria-keyshortcuts="Control+Z">
            Undo <Kbd>Ctrl Z</Kbd>
          </Button>
        )}
        {single !== undefined && standing?.cause != null && (
          <Button
            tone="quiet"
            size="small"
            onClick={() =>
              decisions.decide([{ nominal_Hz: single.nominal_Hz, cause: null, reason: null }])
            }
          >
            Open it again
          </Button>
        )}
      </p>
    </form>
  );
}

function sayComputed(computed: readonly DecisionCause[]): string {
  const names = [...new Set(computed)].map((cause) => CAUSE_WORDS[cause]);
  return names.length > 3 ? `computed: ${names.length} causes` : `computed: ${names.join(", ")}`;
}

function toConfirmWords(cause: DecisionCause | null, changes: boolean, count: number): string {
  const verb = changes ? "Change to" : "Confirm";
  if (cause === null) return `Confirm ${count} bands as computed`;
  return count === 1
    ? `${verb} ${CAUSE_WORDS[cause]}`
    : `${verb} ${CAUSE_WORDS[cause]}, ${count} bands`;
}
