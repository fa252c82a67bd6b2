"use client";

import { useState } from "react";
import type { DecisionCause } from "@/lib/review/review-schema";

export interface Selection {
  hz: number | null;
  /** Ends of the selected range; both the band itself where only one is selected. */
  fromHz: number;
  toHz: number;
  /** The highest band of the range: from there the next open one is looked for. */
  topHz: number | null;
  /** Picked for what is selected now; null: as computed. */
  picked: DecisionCause | null;
  /** Counts up when the keyboard should come to the decision. */
  focusCount: number;
  select: (nominalHz: number) => void;
  /** With Shift: everything from the anchor to this band. */
  extend: (nominalHz: number) => void;
  pick: (cause: DecisionCause | null) => void;
  askFocus: () => void;
}

/** One band, or a range from an anchor, and the cause that was picked for it. */
export function useSelection(hz: number | null, onMove: (nominalHz: number) => void): Selection {
  const [anchorHz, setAnchorHz] = useState<number | null>(null);
  const [pick, setPick] = useState<{ place: string; cause: DecisionCause | null } | null>(null);
  const [focusCount, setFocusCount] = useState(0);
  const fromHz = anchorHz ?? hz ?? 0;
  const toHz = hz ?? 0;
  const place = `${fromHz} ${toHz}`;
  return {
    hz,
    fromHz,
    toHz,
    topHz: hz === null ? null : Math.max(fromHz, toHz),
    // Another selection starts as computed.
    picked: pick?.place === place ? pick.cause : null,
    focusCount,
    select: (nominalHz) => {
      setAnchorHz(null);
      setPick(null);
      onMove(nominalHz);
    },
    extend: (nominalHz) => {
      setAnchorHz(anchorHz ?? hz);
      onMove(nominalHz);
    },
    pick: (cause) => setPick({ place, cause }),
    askFocus: () => setFocusCount((n) => n + 1),
  };
}
