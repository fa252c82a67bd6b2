import type { Step } from "@/lib/api/series";
import type { SeriesState } from "@/lib/series/vocabulary";
import { joinClasses } from "./join-classes";
import { VerdictMark } from "./verdict";

type BoxState = "done" | "now" | "next";

/** The first step that is not done is where the series stands. */
const toBoxes = (steps: readonly Step[]): { step: Step; state: BoxState }[] => {
  const now = steps.findIndex((step) => !step.done);
  return steps.map((step, at) => ({
    step,
    state: step.done ? "done" : at === now ? "now" : "next",
  }));
};

/** The five boxes of a series' life; a phone shows five bars and the words of where it stands. */
export function StateBoxes({ steps, className }: { steps: readonly Step[]; className?: string }) {
  const boxes = toBoxes(steps);
  const here = boxes.find((box) => box.state === "now") ?? boxes.at(-1);
  return (
    <div className={className}>
      <ol className="flex w-full gap-[3px]" aria-label="State of the series">
        {boxes.map(({ step, state }) => (
          <li
            key={step.step}
            className="min-w-0 flex-1"
            aria-current={state === "now" ? "step" : undefined}
          >
            <BoxBar filled={step.share} next={state === "next"} />
            <span className="block max-md:sr-only">
              <StepName step={step} state={state} />
              <span className="figures mt-px block text-label/[15px] text-pretty text-ink-2">
                {step.detail}
              </span>
            </span>
          </li>
        ))}
      </ol>
      {here !== undefined && (
        <p className="flex flex-wrap items-baseline gap-x-3 md:hidden" aria-hidden="true">
          <StepName step={here.step} state={here.state} />
          <span className="figures text-label text-ink-2">{here.step.detail}</span>
        </p>
      )}
    </div>
  );
}

function StepName({ step, state }: { step: Step; state: BoxState }) {
  return (
    <span
      className={joinClasses(
        "flex items-center gap-[5px] text-[15px]/[18px]",
        state === "next" ? "text-ink-2" : "font-[640]",
      )}
    >
      {state === "done" && <VerdictMark kind="ok" size={12} />}
      {step.step}
      <span className="sr-only">{SAY[state]}</span>
    </span>
  );
}

const SAY: Record<BoxState, string> = { done: ", done", now: ", now", next: ", to come" };

/** A measuring rod of ten parts, filled as far as the work stands. */
function BoxBar({ filled, next }: { filled: number; next: boolean }) {
  const width = Math.round(Math.min(1, Math.max(0, filled)) * 1000) / 10;
  return (
    <svg
      className={joinClasses(
        "mb-[7px] block h-[9px] w-full border bg-sheet",
        next ? "border-edge" : "border-ink",
      )}
      viewBox="0 0 100 9"
      preserveAspectRatio="none"
      aria-hidden="true"
    >
      <path
        className="stroke-edge"
        d="M10 0v4M20 0v4M30 0v4M40 0v4M50 0v4M60 0v4M70 0v4M80 0v4M90 0v4"
        vectorEffect="non-scaling-stroke"
        fill="none"
      />
      <rect className="fill-ink" width={width} height="9" />
    </svg>
  );
}

/** Boxes done in each state; the next one is half full while somebody or something works on it. */
const SQUARES: Record<SeriesState, { done: number; going: boolean }> = {
  planned: { done: 0, going: false },
  capturing: { done: 0, going: true },
  analysing: { done: 1, going: true },
  "analysis failed": { done: 1, going: true },
  "in review": { done: 2, going: true },
  "signed off": { done: 4, going: false },
};

interface StateSquaresProps {
  state: SeriesState;
  /** "12 of 27 bands", "5 of 11 recordings". */
  note: string;
}

/** The same as five small squares for a list row, with the state's word and a note beside them. */
export function StateSquares({ state, note }: StateSquaresProps) {
  const { done, going } = SQUARES[state];
  return (
    <span className="inline-grid grid-cols-[auto_1fr] items-center gap-x-[9px] text-[15px]/[19px]">
      <svg width="58" height="9" viewBox="0 0 58 9" aria-hidden="true">
        {[0, 1, 2, 3, 4].map((box) => {
          const half = going && box === done;
          const reached = box < done;
          return (
            <g key={box} transform={`translate(${box * 12} 0)`}>
              <rect
                x="0.5"
                y="0.5"
                width="9"
                height="8"
                className={joinClasses(
                  "fill-sheet",
                  reached || half ? "stroke-ink" : "stroke-edge",
                )}
              />
              {(reached || half) && (
                <rect
                  x="0.5"
                  y={half ? 4.5 : 0.5}
                  width="9"
                  height={half ? 4 : 8}
                  className="fill-ink"
                />
              )}
            </g>
          );
        })}
      </svg>
      <span className={joinClasses(state === "analysis failed" && "font-semibold text-fault")}>
        {state}
      </span>
      <span className="figures col-start-2 text-label text-ink-2">{note}</span>
    </span>
  );
}
