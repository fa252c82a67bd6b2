"use client";

import { useQuery } from "@tanstack/react-query";
import type { z } from "zod";
import type { compareAnalyses } from "@/lib/api/review";
import { formatDb, formatFrequency } from "@/lib/charts/format";
import { CAUSE_WORDS } from "@/lib/charts/marks";
import type { Limit, Onset } from "@/lib/result/result-schema";
import { Button } from "../parts/button";
import { ValuesTable } from "../parts/values-table";
import { changesQuery, useKeepDecisions } from "../queries/review";

interface VersionChangesProps {
  seriesId: string;
  analysisId: string;
  version: number;
  /** The version that was signed, or reviewed, before. */
  before: { analysisId: string; version: number; signed: boolean };
  /** Bands that have no decision yet in the newer version. */
  openHz: readonly number[];
  /** The caller may decide, and no sign-off stands. */
  mayKeep: boolean;
  /** Shows the older version instead; left out where it is not signed. */
  onShowSigned?: () => void;
}

type Change = z.output<NonNullable<typeof compareAnalyses.answer>>["bands"][number];

/** A newer analysis against the one that was signed: what changed, and which decisions still fit. */
export function VersionChanges({
  seriesId,
  analysisId,
  version,
  before,
  openHz,
  mayKeep,
  onShowSigned,
}: VersionChangesProps) {
  const changes = useQuery(changesQuery(analysisId, before.analysisId));
  const keep = useKeepDecisions({ seriesId, analysisId });
  const bands = changes.data?.bands ?? [];
  const changed = bands.filter((band) => band.changed);
  const kept = bands.filter((band) => band.keeps_decision && openHz.includes(band.nominal_Hz));
  const decided = bands.filter((band) => band.decision?.cause != null);
  const fitting = decided.filter((band) => band.keeps_decision).length;
  return (
    <section
      aria-label={`Version ${version} against version ${before.version}`}
      className="mt-4 border-l-4 border-edge py-0.5 pl-4"
    >
      <h2 className="text-section">
        {before.signed
          ? `Version ${before.version} is signed off; this is version ${version}, which is not`
          : `This is version ${version}; version ${before.version} was reviewed before it`}
      </h2>
      <p className="mt-1 max-w-prose">
        {changes.data === undefined
          ? (changes.error?.message ?? "Comparing the two versions.")
          : `${changed.length} of ${bands.length} bands changed. ${fitting} of ${decided.length} decisions still fit: the same cause, the same kind of limit, an onset no further away than it was uncertain.`}
      </p>
      <div className="mt-2.5 flex flex-wrap items-center gap-2.5">
        {mayKeep && kept.length > 0 && (
          <Button
            tone="decision-second"
            busy={keep.isPending}
            onClick={() => keep.mutate(before.analysisId)}
          >
            Keep {kept.length} {kept.length === 1 ? "decision" : "decisions"}
          </Button>
        )}
        {onShowSigned !== undefined && (
          <Button onClick={onShowSigned}>Look at version {before.version}</Button>
        )}
        {before.signed && (
          <span className="text-small text-ink-2">
            To sign version {version}, reopen the series first.
          </span>
        )}
      </div>
      {keep.error !== null && (
        <p role="alert" className="mt-1.5 text-small text-fault">
          {keep.error.message}
        </p>
      )}
      {changed.length > 0 && (
        <ValuesTable
          caption={`Bands that differ between version ${before.version} and version ${version}`}
          summary={`${changed.length === 1 ? "The band" : `The ${changed.length} bands`} that changed`}
          columns={[
            { key: "band", head: "band" },
            { key: "cause", head: "cause", words: true },
            { key: "onset", head: "onset", words: true },
            { key: "limit", head: "limit", words: true },
            { key: "decision", head: "decision", words: true },
          ]}
          rows={changed.map((band) => ({ id: band.nominal_Hz, cells: toCells(band) }))}
        />
      )}
    </section>
  );
}

function toCells(band: Change) {
  const { cause, onset, limit, decision } = band;
  return {
    band: formatFrequency(band.nominal_Hz),
    cause: sayBoth(cause.before, cause.after),
    onset: sayBoth(sayEstimate(onset.before), sayEstimate(onset.after)),
    limit: sayBoth(sayEstimate(limit.before), sayEstimate(limit.after)),
    decision:
      decision?.cause == null
        ? "none"
        : `${CAUSE_WORDS[decision.cause]}, ${band.keeps_decision ? "still fits" : "to be decided anew"}`,
  };
}

const sayBoth = (before: string, after: string): string =>
  before === after ? before : `${before}, now ${after}`;

function sayEstimate(estimate: Pick<Limit | Onset, "status" | "nominal_dB" | "spl_dB"> | null) {
  if (estimate === null) return "none";
  const level = estimate.spl_dB ?? estimate.nominal_dB;
  return estimate.status === "found" && level !== null ? formatDb(level) : estimate.status;
}
