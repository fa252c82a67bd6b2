"use client";

import { useState } from "react";
import type { Review } from "@/lib/api/review";
import { sayCriterion } from "@/lib/result/criteria";
import type { Criterion } from "@/lib/series/series-schema";
import { Button, Unavailable } from "../parts/button";
import { SignOffDialog } from "./sign-off-dialog";
import { sayOpenBands, type ReviewCount } from "./review-state";

interface SignOffBarProps {
  seriesId: string;
  version: number;
  criterion: Criterion;
  review: Review;
  count: ReviewCount;
  /** Decisions that the server has not taken yet. */
  waiting: number;
  mayDecide: boolean;
  onConfirmAll: () => void;
}

/** How far the review is, and what is still missing before it can be signed. */
export function SignOffBar({
  seriesId,
  version,
  criterion,
  review,
  count,
  waiting,
  mayDecide,
  onConfirmAll,
}: SignOffBarProps) {
  const [asking, setAsking] = useState(false);
  const words = sayCriterion(criterion);
  const open = count.openWithoutFinding.length;
  const refusal =
    waiting > 0
      ? "Decisions are on their way; sign-off waits for them."
      : count.decided < count.total
        ? `${count.total - count.decided} of ${count.total} bands are open.`
        : review.sign_off_refusal;
  return (
    <section aria-label="Review" className="mt-4 border-t border-rule pt-3">
      <div className="flex flex-wrap items-start justify-between gap-x-6 gap-y-3">
        <p className="max-w-prose">
          <b className="font-semibold">
            {count.decided} of {count.total} bands decided.
          </b>{" "}
          {sayOpenBands(count)} Sign-off names one criterion and version {version}.
        </p>
        {mayDecide && (
          <div className="flex flex-wrap items-center gap-2.5">
            {open > 0 && (
              <Button tone="decision-second" onClick={onConfirmAll}>
                Confirm all not reached
              </Button>
            )}
            {refusal === null && review.decisions_digest !== null ? (
              <Button tone="decision" onClick={() => setAsking(true)}>
                Sign off for {words}
              </Button>
            ) : (
              <Unavailable reason={refusal ?? "The decisions are being read."}>
                Sign off for {words}
              </Unavailable>
            )}
          </div>
        )}
      </div>
      {mayDecide && <AnotherSigns review={review} />}
      {asking && review.decisions_digest !== null && (
        <SignOffDialog
          seriesId={seriesId}
          analysisId={review.analysis_id}
          version={version}
          criterion={criterion}
          digest={review.decisions_digest}
          decisions={review.decisions}
          onClose={() => setAsking(false)}
        />
      )}
    </section>
  );
}

/** The two-person rule, said before the work is done, with who else could sign. */
function AnotherSigns({ review }: { review: Review }) {
  if (review.others_who_may.length === 0) return null;
  const names = review.others_who_may.map((person) => person.name);
  const listed =
    names.length === 1 ? names[0] : `${names.slice(0, -1).join(", ")} or ${names.at(-1) ?? ""}`;
  return (
    <div className="mt-3 border border-rule bg-sheet px-6 py-4 max-md:px-phone">
      <h2 className="text-section">Another analyst signs this off</h2>
      <p className="mt-0.5 max-w-prose text-ink-2">
        You can see and decide everything. You uploaded runs of this version, so under the
        two-person rule somebody else signs off: {listed}.
      </p>
    </div>
  );
}
