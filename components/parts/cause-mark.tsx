import { causeShapes, CAUSE_WORDS, type CauseName } from "@/lib/charts/marks";
import { COLOURS } from "@/lib/charts/tokens";
import { Shapes } from "./shapes";

interface CauseMarkProps {
  cause: CauseName;
  /** Ink when computed, overprint when changed by a person. */
  ink?: "ink" | "overprint" | "onOverprint";
  /** Edge of the square, px. */
  size?: number;
  /** Words for a reader who does not see the mark; leave out where the word stands beside it. */
  label?: string;
}

/** The mark of a cause. `<CauseMark cause="limiter" /> limiter`, or alone with `label={CAUSE_WORDS.limiter}`. */
export function CauseMark({ cause, ink = "ink", size = 16, label }: CauseMarkProps) {
  return (
    <svg
      className="inline-block flex-none align-[-3px]"
      width={size}
      height={size}
      viewBox="-8 -8 16 16"
      role={label === undefined ? undefined : "img"}
      aria-label={label}
      aria-hidden={label === undefined ? true : undefined}
    >
      <Shapes
        shapes={causeShapes(cause, cause === "open" && ink === "ink" ? COLOURS.ink3 : COLOURS[ink])}
      />
    </svg>
  );
}

interface CauseNameProps {
  cause: CauseName;
  changed?: boolean;
}

/** Mark and word. */
export function CauseLabel({ cause, changed = false }: CauseNameProps) {
  return (
    <span className="inline-flex items-center gap-2 whitespace-nowrap">
      <CauseMark cause={cause} ink={changed ? "overprint" : "ink"} />
      {CAUSE_WORDS[cause]}
    </span>
  );
}
