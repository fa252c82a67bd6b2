"use client";

import { toClock } from "@/lib/time/time-words";
import { useLabZone } from "../frame/lab-session";
import { ConnectionBar } from "../parts/states";
import type { OutboxState } from "./decision-outbox";

/** Decisions wait in order while the connection is lost, and are counted. */
export function WaitingBar({ outbox, onRetry }: { outbox: OutboxState; onRetry: () => void }) {
  const zone = useLabZone();
  if (outbox.lostSinceMs === null) return null;
  const count = outbox.acts.reduce((sum, act) => sum + act.decisions.length, 0);
  return (
    <div className="mt-3">
      <ConnectionBar onRetry={onRetry}>
        No connection since {toClock(new Date(outbox.lostSinceMs), zone)}.{" "}
        {count === 1
          ? "Your decision is kept here and sent when it returns."
          : `Your ${count} decisions are kept here and sent when it returns.`}
      </ConnectionBar>
    </div>
  );
}
