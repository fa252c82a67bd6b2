"use client";

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
  const since = new Date(sinceMs).toLocaleTimeString("en-GB", {
    hour: "2-digit",
    minute: "2-digit",
  });
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
