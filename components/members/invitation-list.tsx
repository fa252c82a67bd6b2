"use client";

import type { Invitation } from "@/lib/api/members";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { useWithdrawInvitation } from "../queries/people";

/** The link was shown besides: what did not arrive can be handed over in another way. */
function sayMail({ state, error }: NonNullable<Invitation["mail"]>): string {
  if (state === "sent") return "mail sent";
  const why = error === null ? "" : `: ${error}`;
  return state === "waiting" ? `mail waits${why}` : `mail not delivered${why}`;
}

/** Links that nobody used yet. */
export function InvitationList({ invitations }: { invitations: readonly Invitation[] }) {
  const withdraw = useWithdrawInvitation();
  return (
    <section aria-labelledby="open-invitations" className="mt-7">
      <h2 id="open-invitations">Open invitations</h2>
      {invitations.length === 0 ? (
        <p className="mt-1 text-ink-2">None. An invitation stands here until it is used.</p>
      ) : (
        <ul className="mt-2 border-y border-rule">
          {invitations.map((invitation) => (
            <li
              key={invitation.id}
              className="flex flex-wrap items-center gap-x-5 gap-y-1 border-t border-rule py-2.5 first:border-t-0"
            >
              <span className="min-w-0 flex-[1_1_220px]">
                {invitation.name !== "" && (
                  <span className="block font-semibold">{invitation.name}</span>
                )}
                <span className="figures block text-figure break-all">{invitation.email}</span>
              </span>
              <span className="flex-[1_1_160px] text-small">{invitation.roles.join(", ")}</span>
              <span className="figures flex-[1_1_190px] text-label text-ink-2">
                from {invitation.created_by?.name ?? "the command line"}
                <br />
                good until <Moment at={invitation.expires_at} as="day" />
                {invitation.mail !== null && (
                  <>
                    <br />
                    {sayMail(invitation.mail)}
                  </>
                )}
              </span>
              <Button
                size="small"
                aria-label={`Withdraw the invitation for ${invitation.email}`}
                busy={withdraw.isPending && withdraw.variables === invitation.id}
                onClick={() => withdraw.mutate(invitation.id)}
              >
                Withdraw
              </Button>
            </li>
          ))}
        </ul>
      )}
      {withdraw.isError && (
        <p role="alert" className="mt-2 text-fault">
          {withdraw.error.message}
        </p>
      )}
    </section>
  );
}
