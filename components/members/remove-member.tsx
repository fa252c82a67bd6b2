"use client";

import { useState } from "react";
import type { Member } from "@/lib/api/members";
import { useLabSession } from "../frame/lab-session";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { useRemoveMember } from "../queries/people";

/** Out of the lab, asked once more. */
export function RemoveMember({ member, self }: { member: Member; self: boolean }) {
  const { lab } = useLabSession();
  const remove = useRemoveMember();
  const [asked, setAsked] = useState(false);
  const words = self ? "Leave" : "Remove";
  return (
    <>
      <Button
        size="small"
        aria-label={self ? "Leave the lab" : `Remove ${member.name}`}
        onClick={() => setAsked(true)}
      >
        {words}
      </Button>
      <Dialog
        open={asked}
        onClose={() => {
          setAsked(false);
          remove.reset();
        }}
        title={
          self
            ? `Leave ${lab?.name ?? "the lab"}?`
            : `Remove ${member.name} from ${lab?.name ?? "the lab"}?`
        }
        actions={
          <Button
            tone="decision"
            busy={remove.isPending}
            onClick={() =>
              remove.mutate(member.id, {
                onSuccess: () => {
                  if (self) window.location.assign("/account");
                  else setAsked(false);
                },
              })
            }
          >
            {words}
          </Button>
        }
      >
        <p>
          {self ? "You are" : `${member.name} is`} out at once, in the browser and by every token.
          What was done stays in the histories under the same name. To come back takes a new
          invitation.
        </p>
        {remove.isError && (
          <p role="alert" className="mt-2 text-fault">
            {remove.error.message}
          </p>
        )}
      </Dialog>
    </>
  );
}
