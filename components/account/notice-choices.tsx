"use client";

import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { NOTICES, type NoticeKind } from "@/lib/mail/notices";
import { Button } from "../parts/button";
import { Checkbox } from "../parts/checkbox";
import { FaultBar } from "../parts/fault-bar";
import { LoadingState } from "../parts/states";
import { noticesQuery, useChooseNotice } from "../queries/mail";

/** Which mails one wants, in the lab that is open now; each choice is saved as it is made. */
export function NoticeChoices({ lab }: { lab: string }) {
  const choices = useQuery(noticesQuery);
  const choose = useChooseNotice();
  // Shown from the click on: a mutation tells of itself a moment later, and the box would jump back.
  const [changing, setChanging] = useState<{ kind: NoticeKind; wanted: boolean } | null>(null);
  if (choices.isPending) {
    return <LoadingState label="Loading the notices" onRetry={() => void choices.refetch()} />;
  }
  if (choices.data === undefined) {
    return (
      <FaultBar
        title="The notices could not be read"
        actions={<Button onClick={() => void choices.refetch()}>Try again</Button>}
      >
        {choices.error.message}
      </FaultBar>
    );
  }
  const { notices } = choices.data;
  if (notices.length === 0) {
    return <p>Your roles in {lab} bring no notices: testers, analysts and reviewers get them.</p>;
  }
  return (
    <fieldset>
      <legend className="text-ink-2">A mail comes from {lab} when</legend>
      <ul className="mt-1.5 grid gap-1.5">
        {notices.map(({ kind, wanted }) => (
          <li key={kind}>
            <Checkbox
              checked={changing?.kind === kind ? changing.wanted : wanted}
              disabled={changing?.kind === kind}
              onChange={(event) => {
                const choice = { kind, wanted: event.target.checked };
                setChanging(choice);
                choose.mutate(choice, { onSettled: () => setChanging(null) });
              }}
            >
              {NOTICES[kind].words}
            </Checkbox>
          </li>
        ))}
      </ul>
      <p className="mt-2 text-small text-ink-2">What you do yourself brings no mail.</p>
      {choose.isError && (
        <p role="alert" className="mt-2 text-fault">
          The choice was not saved. {choose.error.message}
        </p>
      )}
    </fieldset>
  );
}
