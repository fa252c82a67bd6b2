"use client";

import type { Review } from "@/lib/api/review";
import type { Criterion } from "@/lib/series/series-schema";
import type { ReviewCount } from "./review-state";
import { SignOffBar } from "./sign-off-bar";
import { SignedBar } from "./signed-bar";

interface ReviewFootProps {
  seriesId: string;
  version: number;
  criterion: Criterion;
  review: Review;
  count: ReviewCount;
  waiting: number;
  mayDecide: boolean;
  mayReopen: boolean;
  onConfirmAll: () => void;
}

/** Under the wall: the way to the sign-off, or the sign-off itself. */
export function ReviewFoot({ mayReopen, ...bar }: ReviewFootProps) {
  const { sign_off: signOff } = bar.review;
  return (
    <>
      {signOff !== null && (
        <SignedBar seriesId={bar.seriesId} signOff={signOff} mayDecide={mayReopen} />
      )}
      {signOff === null && <SignOffBar {...bar} />}
    </>
  );
}
