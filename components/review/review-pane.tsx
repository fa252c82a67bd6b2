"use client";

import type { Review } from "@/lib/api/review";
import type { Band } from "@/lib/result/result-schema";
import { CommentList } from "./comment-list";
import { DecisionLine } from "./decision-line";
import { DecisionPanel, type DecisionPanelProps, type FocusRequest } from "./decision-panel";
import { RunRequests } from "./run-requests";

interface ReviewPaneProps extends DecisionPanelProps, FocusRequest {
  seriesId: string;
  review: Review;
  band: Band;
  /** Decisions can be taken now, by this person. */
  open: boolean;
  mayDecide: boolean;
}

/** Below the finding: the decision or what was decided, runs asked for, comments. */
export function ReviewPane({ seriesId, review, band, open, mayDecide, ...panel }: ReviewPaneProps) {
  const standing = panel.decisions.shown.get(band.nominal_Hz);
  return (
    <>
      {open ? (
        <DecisionPanel {...panel} />
      ) : (
        <section aria-label="Decision" className="border-t-[3px] border-overprint py-3">
          <h3 className="mb-2">Decision</h3>
          {standing === undefined ? (
            <p className="text-small text-ink-2">No decision yet.</p>
          ) : (
            <DecisionLine decision={standing} />
          )}
        </section>
      )}
      <RunRequests seriesId={seriesId} requests={review.run_requests} mayDecide={open} />
      <CommentList
        key={band.nominal_Hz}
        seriesId={seriesId}
        analysisId={review.analysis_id}
        nominalHz={band.nominal_Hz}
        comments={review.comments}
        mayDecide={mayDecide}
      />
    </>
  );
}
