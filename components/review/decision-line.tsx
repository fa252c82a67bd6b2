"use client";

import { CAUSE_WORDS } from "@/lib/charts/marks";
import { toMoment } from "@/lib/time/time-words";
import { useLabZone } from "../frame/lab-session";
import { useNow } from "../frame/use-now";
import { CauseMark } from "../parts/cause-mark";
import type { ShownDecision } from "./review-state";

/** Who decided what, when and why; for everybody who may see the series. */
export function DecisionLine({ decision }: { decision: ShownDecision | undefined }) {
  const zone = useLabZone();
  const now = useNow();
  if (decision === undefined) return null;
  const { cause, changed, by, at, reason, waiting, computed_cause } = decision;
  return (
    <div className="mb-2.5 border-l-2 border-overprint pl-3 text-small">
      <p className="flex flex-wrap items-center gap-x-2">
        {cause === null ? (
          "Opened again"
        ) : (
          <span className="inline-flex items-center gap-1.5 font-semibold text-overprint">
            <CauseMark cause={cause} ink="overprint" />
            {CAUSE_WORDS[cause]}
          </span>
        )}
        <span className="text-ink-2">
          {cause === null ? "" : changed ? `changed from ${computed_cause}` : "confirmed"} by{" "}
          {by.name}, {waiting ? "waiting to be sent" : toMoment(at, now, zone)}
        </span>
      </p>
      {reason !== null && <p>“{reason}”</p>}
    </div>
  );
}
