"use client";

import { useState } from "react";
import { sayCriterion } from "@/lib/result/criteria";
import type { SignOff } from "@/lib/review/review-schema";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { useReopen } from "../queries/review";
import { ReasonDialog } from "../runs/reason-dialog";

interface SignedBarProps {
  seriesId: string;
  signOff: SignOff;
  mayDecide: boolean;
}

/** The sign-off in force: what it binds, who gave it, and the way back. */
export function SignedBar({ seriesId, signOff, mayDecide }: SignedBarProps) {
  const [reopening, setReopening] = useState(false);
  const reopen = useReopen(seriesId);
  return (
    <section
      aria-label="Sign-off"
      className="mt-4 flex flex-wrap items-start justify-between gap-x-6 gap-y-3 border-t-[3px] border-overprint pt-3"
    >
      <div className="min-w-0">
        <p>
          <b className="font-semibold">
            Signed off for {sayCriterion(signOff.criterion)}, version {signOff.analysis_version}
          </b>{" "}
          by {signOff.by.name}, <Moment at={signOff.at} />.
        </p>
        {signOff.one_person && (
          <p className="text-ink-2">One person recorded runs of this version and signed it.</p>
        )}
        <p className="figures mt-1 text-label break-all text-ink-2">
          decisions {signOff.decisions_digest}
        </p>
        <p className="figures text-label break-all text-ink-2">result {signOff.result_digest}</p>
      </div>
      {mayDecide && <Button onClick={() => setReopening(true)}>Reopen, with a reason</Button>}
      {reopening && (
        <ReasonDialog
          title={`Reopen version ${signOff.analysis_version}`}
          words="The sign-off is taken back and stays in the history. What is published stays as it is until a correction."
          act="Reopen"
          onGive={async (reason) => void (await reopen.mutateAsync(reason))}
          onClose={() => setReopening(false)}
        />
      )}
    </section>
  );
}
