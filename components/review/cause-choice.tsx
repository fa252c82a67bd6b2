import { CAUSE_WORDS, causeKey } from "@/lib/charts/marks";
import type { DecisionCause } from "@/lib/review/review-schema";
import { DECIDABLE_CAUSES } from "@/lib/series/vocabulary";
import { CauseMark } from "../parts/cause-mark";
import { joinClasses } from "../parts/join-classes";
import { Kbd } from "../parts/kbd";

interface CauseChoiceProps {
  picked: DecisionCause | null;
  /** "Distortion only" is offered where it was computed. */
  withDistortionOnly: boolean;
  onPick: (cause: DecisionCause) => void;
}

/** The eight causes with their keys. */
export function CauseChoice({ picked, withDistortionOnly, onPick }: CauseChoiceProps) {
  return (
    <div className="grid grid-cols-2 gap-1.5">
      {withDistortionOnly && (
        <Choice cause="distortion only" picked={picked} onPick={onPick} className="col-span-2" />
      )}
      {DECIDABLE_CAUSES.map((cause) => (
        <Choice key={cause} cause={cause} picked={picked} onPick={onPick} hint={causeKey(cause)} />
      ))}
    </div>
  );
}

interface ChoiceProps {
  cause: DecisionCause;
  picked: DecisionCause | null;
  onPick: (cause: DecisionCause) => void;
  hint?: number;
  className?: string;
}

function Choice({ cause, picked, onPick, hint, className }: ChoiceProps) {
  const on = cause === picked;
  return (
    <button
      type="button"
      aria-pressed={on}
      aria-keyshortcuts={hint === undefined ? undefined : String(hint)}
      onClick={() => onPick(cause)}
      className={joinClasses(
        "flex min-h-[34px] items-center gap-2 rounded-control border px-2 text-left text-small max-md:min-h-11",
        on
          ? "border-2 border-overprint bg-overprint-wash px-[7px] font-semibold text-overprint"
          : "border-edge bg-sheet hover:bg-wash",
        className,
      )}
    >
      <CauseMark cause={cause} ink={on ? "overprint" : "ink"} />
      {CAUSE_WORDS[cause]}
      {hint !== undefined && (
        <span className="ml-auto" aria-hidden="true">
          <Kbd>{String(hint)}</Kbd>
        </span>
      )}
    </button>
  );
}
