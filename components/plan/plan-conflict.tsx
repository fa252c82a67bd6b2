"use client";

import { useState } from "react";
import type { SeriesView } from "@/lib/api/series";
import type { Plan } from "@/lib/series/plan-schema";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { toPlanDifferences } from "./plan-diff";

interface PlanConflictProps {
  theirs: SeriesView;
  mine: Plan;
  onTakeTheirs: () => void;
  onKeepMine: () => Promise<void>;
}

/** Somebody saved meanwhile: both values side by side, and the choice. */
export function PlanConflict({ theirs, mine, onTakeTheirs, onKeepMine }: PlanConflictProps) {
  const [busy, setBusy] = useState(false);
  const differences = toPlanDifferences(theirs.plan, mine);
  return (
    <FaultBar
      className="my-4"
      title="The plan was changed while you were writing"
      actions={
        <>
          <Button onClick={onTakeTheirs}>Take theirs</Button>
          <Button
            tone="decision"
            busy={busy}
            onClick={() => {
              setBusy(true);
              void onKeepMine().finally(() => setBusy(false));
            }}
          >
            Save mine over it
          </Button>
        </>
      }
    >
      {differences.length === 0 ? (
        <p>Both plans are the same by now.</p>
      ) : (
        <table className="w-full max-w-prose border-collapse text-left text-small">
          <thead>
            <tr className="figures text-label text-ink-2">
              <th scope="col" className="py-1 pr-3 font-medium">
                what differs
              </th>
              <th scope="col" className="py-1 pr-3 font-medium">
                theirs
              </th>
              <th scope="col" className="py-1 font-medium">
                yours
              </th>
            </tr>
          </thead>
          <tbody>
            {differences.map((difference) => (
              <tr key={difference.field}>
                <th scope="row" className="border-t border-rule py-1 pr-3 font-normal">
                  {difference.field}
                </th>
                <td className="border-t border-rule py-1 pr-3">{difference.theirs}</td>
                <td className="border-t border-rule py-1">{difference.mine}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </FaultBar>
  );
}
