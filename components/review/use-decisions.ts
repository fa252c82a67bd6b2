"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useMemo, useRef, useState, useSyncExternalStore } from "react";
import { callApi } from "@/lib/api/client";
import { decideBands, type Review } from "@/lib/api/review";
import type { Band } from "@/lib/result/result-schema";
import type { DecisionCause } from "@/lib/review/review-schema";
import { useLabSession } from "../frame/lab-session";
import { queryKeys } from "../queries/query-keys";
import { DecisionOutbox, type OutboxState } from "./decision-outbox";
import { toNewest, toShownDecisions, toWanted, type ShownDecision } from "./review-state";

export interface BandChoice {
  nominal_Hz: number;
  /** null opens the band again. */
  cause: DecisionCause | null;
  reason: string | null;
}

/** What an act put in the place of what. */
interface Done {
  before: BandChoice[];
  /** By band: the version that the act made. */
  versions: Map<number, number>;
}

export interface Decisions {
  shown: ReadonlyMap<number, ShownDecision>;
  outbox: OutboxState;
  decide: (choices: readonly BandChoice[]) => void;
  /** Takes back the newest act that is still in force. @returns the bands, null where none is. */
  undo: () => number[] | null;
  mayUndo: boolean;
  keepTheirs: () => void;
  takeMine: (reason: string | null) => void;
  retry: () => void;
  dismissFault: () => void;
}

interface DecisionsInput {
  seriesId: string;
  analysisId: string;
  review: Pick<Review, "decisions">;
  bands: readonly Band[];
}

/** The decisions of an analysis as they stand for this person, and the acts on them. */
export function useDecisions({ seriesId, analysisId, review, bands }: DecisionsInput): Decisions {
  const client = useQueryClient();
  const { account } = useLabSession();
  const [outbox] = useState(() => {
    const stale = (): void =>
      void client.invalidateQueries({ queryKey: queryKeys.series(seriesId) });
    return new DecisionOutbox<Review>({
      send: (decisions) =>
        callApi(decideBands, { params: { analysisId }, body: { decisions: [...decisions] } }),
      onTaken: (answer) => {
        client.setQueryData(queryKeys.review(seriesId, analysisId), answer);
        void client.invalidateQueries({ queryKey: queryKeys.series(seriesId), exact: true });
        void client.invalidateQueries({ queryKey: queryKeys.history(seriesId) });
        void client.invalidateQueries({ queryKey: queryKeys.seriesLists });
      },
      onStale: stale,
    });
  });
  const state = useSyncExternalStore(outbox.subscribe, outbox.getState, outbox.getState);
  const done = useRef<Done[]>([]);
  const [undoable, setUndoable] = useState(0);

  useEffect(() => {
    window.addEventListener("online", outbox.retry);
    return () => {
      window.removeEventListener("online", outbox.retry);
      outbox.stop();
    };
  }, [outbox]);
  const waits = state.acts.length > 0;
  useEffect(() => {
    if (!waits) return;
    const hold = (event: BeforeUnloadEvent): void => event.preventDefault();
    window.addEventListener("beforeunload", hold);
    return () => window.removeEventListener("beforeunload", hold);
  }, [waits]);

  const shown = useMemo(
    () => toShownDecisions(toNewest(review.decisions, state.taken), state.acts, bands, account),
    [review.decisions, state.taken, state.acts, bands, account],
  );

  const put = (choices: readonly BandChoice[]): void => outbox.add(toWanted(shown, choices));
  const decide = (choices: readonly BandChoice[]): void => {
    done.current.push({
      before: choices.map(({ nominal_Hz }) => ({
        nominal_Hz,
        cause: shown.get(nominal_Hz)?.cause ?? null,
        reason: shown.get(nominal_Hz)?.reason ?? null,
      })),
      versions: new Map(
        choices.map(({ nominal_Hz }) => [nominal_Hz, (shown.get(nominal_Hz)?.version ?? 0) + 1]),
      ),
    });
    setUndoable(done.current.length);
    put(choices);
  };
  const undo = (): number[] | null => {
    for (let last = done.current.pop(); last !== undefined; last = done.current.pop()) {
      const { before, versions } = last;
      // What somebody else changed since is theirs, not mine to take back.
      const mine = before.filter(
        ({ nominal_Hz }) => shown.get(nominal_Hz)?.version === versions.get(nominal_Hz),
      );
      if (mine.length === 0) continue;
      setUndoable(done.current.length);
      put(mine);
      return mine.map((one) => one.nominal_Hz);
    }
    setUndoable(0);
    return null;
  };
  return {
    shown,
    outbox: state,
    decide,
    undo,
    mayUndo: undoable > 0,
    keepTheirs: () => outbox.keepTheirs(),
    takeMine: (reason) => outbox.takeMine(reason),
    retry: outbox.retry,
    dismissFault: () => outbox.dismissFault(),
  };
}
