"use client";

import { useQuery } from "@tanstack/react-query";
import { useLabSession } from "../frame/lab-session";
import { LabHead } from "../lab/lab-head";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { invitationsQuery, membersQuery } from "../queries/people";
import { InvitationList } from "./invitation-list";
import { InviteForm } from "./invite-form";
import { MemberRow } from "./member-row";
import { RoleKey } from "./role-key";
import { findOnlyAdmin, toMembersLine } from "./role-words";

interface MembersScreenProps {
  mayAdminister: boolean;
  /** Of the local mailbox; null where mail goes out. */
  mailboxUrl: string | null;
}

/** Who belongs to the lab and what they may do; for an admin the ways in and out. */
export function MembersScreen({ mayAdminister, mailboxUrl }: MembersScreenProps) {
  const { account } = useLabSession();
  const members = useQuery(membersQuery);
  const invitations = useQuery({ ...invitationsQuery, enabled: mayAdminister });
  const people = members.data?.members ?? [];
  const open = invitations.data?.invitations ?? [];
  const onlyAdmin = findOnlyAdmin(people);
  return (
    <>
      <LabHead
        title="Members"
        line={members.data === undefined ? undefined : toMembersLine(people.length, open.length)}
      />
      <div className="grid items-start gap-x-10 gap-y-8 px-gutter pb-10 max-md:px-phone lg:grid-cols-[minmax(0,1fr)_400px]">
        <div className="min-w-0">
          <section aria-labelledby="people">
            <h2 id="people">People</h2>
            {members.isPending && (
              <LoadingState label="Loading the members" onRetry={() => void members.refetch()} />
            )}
            {members.isError && members.data === undefined && (
              <FaultBar
                className="mt-2"
                title="The members could not be read"
                actions={<Button onClick={() => void members.refetch()}>Try again</Button>}
              >
                {members.error.message}
              </FaultBar>
            )}
            {people.length > 0 && (
              <ul className="mt-2 border-y border-rule">
                {people.map((member) => (
                  <MemberRow
                    key={member.id}
                    member={member}
                    self={member.id === account.id}
                    onlyAdmin={member.id === onlyAdmin}
                    mayAdminister={mayAdminister}
                  />
                ))}
              </ul>
            )}
          </section>
          {mayAdminister && people.length === 1 && (
            <EmptyState className="mt-5" title="You are alone here">
              A lab measures better with two: who signs off should not have made the recordings.
              Invite somebody, and give each the roles they need.
            </EmptyState>
          )}
          {mayAdminister && invitations.data !== undefined && <InvitationList invitations={open} />}
          {mayAdminister && invitations.isError && invitations.data === undefined && (
            <FaultBar
              className="mt-7"
              title="The open invitations could not be read"
              actions={<Button onClick={() => void invitations.refetch()}>Try again</Button>}
            >
              {invitations.error.message}
            </FaultBar>
          )}
        </div>
        {mayAdminister ? <InviteForm mailboxUrl={mailboxUrl} /> : <RoleKey />}
      </div>
    </>
  );
}
