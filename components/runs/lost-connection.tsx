"use client";

import { toClock } from "@/lib/time/time-words";
import { useLabZone } from "../frame/lab-session";
import { ConnectionBar } from "../parts/states";

interface LostConnectionProps {
  /** When the last answer came. */
  sinceMs: number;
  /** Files that wait for the connection. */
  waiting: number;
  onRetry: () => void;
}

/** The page stays usable; what is on its way waits and goes on by itself. */
export function LostConnection({ sinceMs, waiting, onRetry }: LostConnectionProps) {
  const since = toClock(new Date(sinceMs), useLabZone());
  return (
    <div className="mb-3">
      <ConnectionBar onRetry={onRetry}>
        No connection since {since}.{" "}
        {waiting === 0
          ? "What you see is as it was then."
          : waiting === 1
            ? "One file goes on by itself when it returns."
            : `${waiting} files go on by themselves when it returns.`}
      </ConnectionBar>
    </div>
  );
}
