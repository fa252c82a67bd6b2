/** The state of a series and the boxes in its header: derived from facts, never set by hand. */
import type { SeriesState } from "./vocabulary";

export interface SeriesFacts {
  /** Recordings of any kind are in, or a planned one is excused. */
  begun: boolean;
  /** Places of the plan that have a usable recording or an excuse. */
  captured: number;
  planned: number;
  /** Of the analysis that counts now: the one asked for last, cancelled ones left out. */
  analysis: "queued" | "running" | "done" | "failed" | null;
  signedOff: boolean;
}

export function toSeriesState(facts: SeriesFacts): SeriesState {
  if (facts.signedOff) return "signed off";
  switch (facts.analysis) {
    case "queued":
    case "running":
      return "analysing";
    case "failed":
      return "analysis failed";
    case "done":
      return "in review";
    case null:
      return facts.begun ? "capturing" : "planned";
  }
}

export interface StepFacts extends SeriesFacts {
  /** Share of the analysis that is done, 0 to 1. */
  progress: number;
  /** Words: when and by whom a step was finished ("11 May, I. Varley"); null where not known. */
  capturedNote: string | null;
  analysedNote: string | null;
  signedOffNote: string | null;
  /** Bands of the analysis that counts, and those with a decision. */
  bands: { total: number; decided: number };
  /** A live publication: "14 May, N. Okell"; null where there is none. */
  publishedNote: string | null;
}

export interface SeriesStep {
  step: "captured" | "analysed" | "in review" | "signed off" | "published";
  share: number;
  done: boolean;
  detail: string;
}

/** The five boxes, left to right. */
export function toSeriesSteps(facts: StepFacts): SeriesStep[] {
  const captured = facts.planned > 0 && facts.captured >= facts.planned;
  const analysed = facts.analysis === "done";
  const running = facts.analysis === "running" || facts.analysis === "queued";
  return [
    {
      step: "captured",
      share: facts.planned === 0 ? 0 : Math.min(1, facts.captured / facts.planned),
      done: captured,
      detail: captured
        ? (facts.capturedNote ?? "all recordings are in")
        : `${facts.captured} of ${facts.planned} recordings`,
    },
    {
      step: "analysed",
      share: analysed ? 1 : running ? facts.progress : 0,
      done: analysed,
      detail: analysedDetail(facts, running),
    },
    {
      step: "in review",
      share: facts.signedOff
        ? 1
        : facts.bands.total === 0
          ? 0
          : facts.bands.decided / facts.bands.total,
      done: facts.signedOff,
      detail: toBandsWords(facts.bands),
    },
    {
      step: "signed off",
      share: facts.signedOff ? 1 : 0,
      done: facts.signedOff,
      detail: facts.signedOff ? (facts.signedOffNote ?? "signed off") : "needs analyst",
    },
    {
      step: "published",
      share: facts.publishedNote === null ? 0 : 1,
      done: facts.publishedNote !== null,
      detail: facts.publishedNote ?? "needs reviewer",
    },
  ];
}

/** "12 of 27 bands". */
export const toBandsWords = ({ total, decided }: StepFacts["bands"]): string =>
  total === 0 ? "needs analyst" : `${decided} of ${total} bands`;

function analysedDetail(facts: StepFacts, running: boolean): string {
  if (facts.analysis === "done") return facts.analysedNote ?? "done";
  if (facts.analysis === "failed") return "failed, needs tester";
  return running ? "under way" : "starts by itself";
}
