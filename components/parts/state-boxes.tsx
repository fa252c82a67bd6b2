import { joinClasses } from "./join-classes";
import { VerdictMark } from "./verdict";

export const STATE_BOX_NAMES = [
  "captured",
  "analysed",
  "in review",
  "signed off",
  "published",
] as const;
export type StateBoxName = (typeof STATE_BOX_NAMES)[number];

export interface StateBox {
  name: StateBoxName;
  /** done: reached. now: the series stands here. next: still to come. */
  state: "done" | "now" | "next";
  /** How full the box is, 0 to 1; done is 1, next is 0. */
  filled: number;
  /** Date and person, or who it needs: "11 May, I. Varley", "needs analyst". */
  note: string;
}

/** The five boxes of a series' life, derived from its state by the caller. */
export function StateBoxes({
  boxes,
  className,
}: {
  boxes: readonly StateBox[];
  className?: string;
}) {
  return (
    <ol
      className={joinClasses("flex w-full gap-[3px] max-md:flex-col max-md:gap-2.5", className)}
      aria-label="State of the series"
    >
      {boxes.map((box) => (
        <li
          key={box.name}
          className="min-w-0 flex-1"
          aria-current={box.state === "now" ? "step" : undefined}
        >
          <BoxBar filled={box.filled} next={box.state === "next"} />
          <span
            className={joinClasses(
              "flex items-center gap-[5px] text-[15px]/[18px]",
              box.state === "next" ? "text-ink-2" : "font-[640]",
            )}
          >
            {box.state === "done" && <VerdictMark kind="ok" size={12} />}
            {box.name}
            <span className="sr-only">{SAY[box.state]}</span>
          </span>
          <span className="figures mt-px block truncate text-label text-ink-2" title={box.note}>
            {box.note}
          </span>
        </li>
      ))}
    </ol>
  );
}

const SAY: Record<StateBox["state"], string> = { done: ", done", now: ", now", next: ", to come" };

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

/** The same as five small squares for a list row, with the word beside it. */
export function StateSquares({
  boxes,
  word,
  note,
}: {
  boxes: readonly StateBox[];
  word: string;
  note: string;
}) {
  return (
    <span className="inline-grid grid-cols-[auto_1fr] items-center gap-x-[9px] text-[15px]/[19px]">
      <svg width="58" height="9" viewBox="0 0 58 9" aria-hidden="true">
        {boxes.map((box, at) => (
          <g key={box.name} transform={`translate(${at * 12} 0)`}>
            <rect
              x="0.5"
              y="0.5"
              width="9"
              height="8"
              strokeWidth="1"
              className={box.state === "next" ? "fill-sheet stroke-edge" : "fill-sheet stroke-ink"}
            />
            {box.state !== "next" && (
              <rect
                x="0.5"
                y={box.state === "done" ? 0.5 : 4.5}
                width="9"
                height={box.state === "done" ? 8 : 4}
                className="fill-ink"
              />
            )}
          </g>
        ))}
      </svg>
      <span>{word}</span>
      <span className="figures col-start-2 text-label text-ink-2">{note}</span>
    </span>
  );
}
