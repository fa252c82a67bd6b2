"use client";

import { sayCriterion } from "@/lib/result/criteria";
import type { Decision } from "@/lib/review/review-schema";
import type { Criterion } from "@/lib/series/series-schema";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { useSignOff } from "../queries/review";

interface SignOffDialogProps {
  seriesId: string;
  analysisId: string;
  version: number;
  criterion: Criterion;
  /** Of the decisions as they stand. */
  digest: string;
  decisions: readonly Decision[];
  onClose: () => void;
}

/** Says what a signature binds before it is given. */
export function SignOffDialog({
  seriesId,
  analysisId,
  version,
  criterion,
  digest,
  decisions,
  onClose,
}: SignOffDialogProps) {
  const signing = useSignOff({ seriesId, analysisId });
  const changed = decisions.filter((decision) => decision.changed).length;
  return (
    <Dialog
      open
      onClose={onClose}
      title={`Sign off version ${version}`}
      actions={
        <Button
          tone="decision"
          busy={signing.isPending}
          onClick={() =>
            signing.mutate({ criterion, decisions_digest: digest }, { onSuccess: onClose })
          }
        >
          Sign off
        </Button>
      }
    >
      <dl className="grid grid-cols-[auto_minmax(0,1fr)] gap-x-4 gap-y-1.5">
        <dt className="text-ink-2">criterion</dt>
        <dd>{sayCriterion(criterion)}, and no other</dd>
        <dt className="text-ink-2">analysis</dt>
        <dd>version {version}, this very one</dd>
        <dt className="text-ink-2">decisions</dt>
        <dd>
          {decisions.length} bands, {changed === 0 ? "none changed" : `${changed} changed`}
        </dd>
        <dt className="text-ink-2">digest</dt>
        <dd className="figures text-label break-all">{digest}</dd>
      </dl>
      <p className="mt-3 text-ink-2">
        Recordings and decisions are then fixed. The series can be reopened, with a reason.
      </p>
      {signing.error !== null && (
        <p role="alert" className="mt-2 text-fault">
          {signing.error.message}
        </p>
      )}
    </Dialog>
  );
}
