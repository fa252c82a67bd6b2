"use client";

import { useState } from "react";
import { toApiPath } from "@/lib/api/client";
import { getEvidence } from "@/lib/api/keeping";
import type { PublicationView } from "@/lib/api/publications";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { useWithdraw } from "../queries/publications";
import { ReasonDialog } from "../runs/reason-dialog";

interface RevisionListProps {
  seriesId: string;
  /** Newest first. */
  revisions: readonly PublicationView[];
  mayPublish: boolean;
}

/** What is out, and what was: each with its address that never moves. */
export function RevisionList({ seriesId, revisions, mayPublish }: RevisionListProps) {
  const [withdrawing, setWithdrawing] = useState<PublicationView | null>(null);
  const withdraw = useWithdraw(seriesId);
  if (revisions.length === 0) return null;
  return (
    <section aria-labelledby="revisions">
      <h2 id="revisions">Revisions</h2>
      <ul className="mt-2 border-t border-ink">
        {revisions.map((one) => (
          <li
            key={one.id}
            className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-rule py-3"
          >
            <p className="mr-auto min-w-0">
              <a href={one.path} className="font-semibold">
                Revision {one.revision}
              </a>
              , {one.state} · <Moment at={one.published_at} as="day" />
              {one.published_by !== null && `, ${one.published_by.name}`}
              <Embargo until={one.embargo_until} />
              {one.change_note !== null && (
                <span className="block text-small text-ink-2">{one.change_note}</span>
              )}
              {one.withdraw_reason !== null && (
                <span className="block text-small text-fault">
                  Withdrawn: {one.withdraw_reason}
                </span>
              )}
              <span className="figures block text-hint break-all text-ink-2">
                {one.path} · {one.digest.slice(0, 12)}
              </span>
            </p>
            <a
              className="text-small"
              href={toApiPath(getEvidence, { publicationId: one.id })}
              download
              aria-label={`Evidence, ZIP${one.evidence_public ? "" : " (not given to readers)"}, revision ${one.revision}`}
            >
              Evidence, ZIP{one.evidence_public ? "" : " (not given to readers)"}
            </a>
            {mayPublish && one.state === "live" && (
              <Button size="small" onClick={() => setWithdrawing(one)}>
                Withdraw
              </Button>
            )}
          </li>
        ))}
      </ul>
      {withdrawing !== null && (
        <ReasonDialog
          title={`Withdraw revision ${withdrawing.revision}`}
          words="Readers see at once that it was withdrawn, and this reason. Its figures are not shown any more."
          act="Withdraw it"
          onGive={async (reason) => {
            await withdraw.mutateAsync({ publicationId: withdrawing.id, reason });
          }}
          onClose={() => setWithdrawing(null)}
        />
      )}
    </section>
  );
}

function Embargo({ until }: { until: string | null }) {
  if (until === null) return null;
  return (
    <>
      {" "}
      · embargo until <Moment at={until} />
    </>
  );
}
