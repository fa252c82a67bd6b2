"use client";

import { useQuery } from "@tanstack/react-query";
import type { Review } from "@/lib/api/review";
import type { SeriesView } from "@/lib/api/series";
import { Button } from "../parts/button";
import { analysesQuery } from "../queries/review";
import { VersionChanges } from "./version-changes";

interface VersionNoticeProps {
  series: SeriesView;
  review: Review;
  version: number;
  isNewest: boolean;
  openHz: readonly number[];
  mayKeep: boolean;
  onShowSigned: (on: boolean) => void;
}

/** No version inherits a sign-off silently: says which one is shown, and against which it changed. */
export function VersionNotice({
  series,
  review,
  version,
  isNewest,
  openHz,
  mayKeep,
  onShowSigned,
}: VersionNoticeProps) {
  const earlier = useQuery({
    ...analysesQuery(series.id),
    enabled: isNewest && version > 1 && review.sign_off === null,
  });
  const newest = series.latest_done_analysis;
  if (!isNewest && newest !== null) {
    return (
      <section
        aria-label="An older version"
        className="mt-4 flex flex-wrap items-center gap-3 border-l-4 border-edge py-1 pl-4"
      >
        <p>
          This is version {version}, which is signed off. Version {newest.version} is newer and is
          not.
        </p>
        <Button onClick={() => onShowSigned(false)}>Look at version {newest.version}</Button>
      </section>
    );
  }
  const standing = review.sign_off;
  if (standing?.analysis_id === review.analysis_id) return null;
  const past = review.past_sign_offs.find((one) => one.analysis_id !== review.analysis_id);
  const last = earlier.data?.analyses.find((one) => one.state === "done" && one.version < version);
  const before =
    standing !== null
      ? { analysisId: standing.analysis_id, version: standing.analysis_version, signed: true }
      : past !== undefined
        ? { analysisId: past.analysis_id, version: past.analysis_version, signed: false }
        : last !== undefined
          ? { analysisId: last.id, version: last.version, signed: false }
          : null;
  if (before === null || (!before.signed && openHz.length === 0)) return null;
  return (
    <VersionChanges
      seriesId={series.id}
      analysisId={review.analysis_id}
      version={version}
      before={before}
      openHz={openHz}
      mayKeep={mayKeep}
      {...(before.signed ? { onShowSigned: () => onShowSigned(true) } : {})}
    />
  );
}
