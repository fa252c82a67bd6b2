"use client";

import { useId, useState } from "react";
import type { Member } from "@/lib/api/members";
import type { Role } from "@/lib/roles/roles";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { useSetRoles } from "../queries/people";
import { RemoveMember } from "./remove-member";
import { RoleBoxes } from "./role-boxes";
import { sameRoles } from "./role-words";

interface MemberRowProps {
  member: Member;
  /** The one who looks. */
  self: boolean;
  /** The lab would lose its last admin. */
  onlyAdmin: boolean;
  mayAdminister: boolean;
}

/** A person and what they may do; an admin ticks boxes and saves. */
export function MemberRow({ member, self, onlyAdmin, mayAdminister }: MemberRowProps) {
  const id = useId();
  const setRoles = useSetRoles();
  const [draft, setDraft] = useState<Role[] | null>(null);
  const [asked, setAsked] = useState(false);
  const roles = draft ?? member.roles;
  const changed = draft !== null && !sameRoles(draft, member.roles);
  const givesUp = self && changed && !draft.includes("admin");

  const save = (): void => {
    setRoles.mutate(
      { accountId: member.id, roles },
      {
        onSuccess: () => {
          // One's own rights stand in every page: all is drawn anew.
          if (self) window.location.reload();
          else setDraft(null);
        },
        onSettled: () => setAsked(false),
      },
    );
  };

  return (
    <li className="grid gap-x-5 gap-y-1.5 border-t border-rule py-3 first:border-t-0 md:grid-cols-[minmax(0,1fr)_minmax(0,auto)_88px] md:items-center">
      <div className="min-w-0">
        <p className="text-[16px]/5 font-[680] break-words">
          {member.name}
          {self && <span className="text-small font-normal text-ink-2"> (you)</span>}
        </p>
        <p className="figures text-figure break-all text-ink-2">{member.email}</p>
        <p className="figures text-label text-ink-3">
          since <Moment at={member.since} as="day" />
        </p>
      </div>
      {mayAdminister ? (
        <RoleBoxes
          legend={`Roles of ${member.name}`}
          hideLegend
          value={roles}
          onChange={(next) => {
            setRoles.reset();
            setDraft(next);
          }}
          disabled={setRoles.isPending}
          locked={onlyAdmin ? { roles: ["admin"], reasonId: `${id}only` } : undefined}
        />
      ) : (
        <p className="md:text-right">{member.roles.join(", ")}</p>
      )}
      {mayAdminister && (
        <div className="flex md:justify-end">
          {!onlyAdmin && <RemoveMember member={member} self={self} />}
        </div>
      )}
      {mayAdminister && onlyAdmin && (
        <p id={`${id}only`} className="col-span-full text-small text-ink-2">
          The only admin: a lab keeps at least one. Make somebody else admin first, to give up this
          role or to leave.
        </p>
      )}
      {changed && (
        <div className="col-span-full flex flex-wrap items-center gap-2.5">
          {roles.length === 0 ? (
            <p className="text-small text-ink-2">
              Choose at least one role. Who needs none is removed from the lab.
            </p>
          ) : (
            <Button
              tone="decision"
              size="small"
              busy={setRoles.isPending}
              onClick={() => (givesUp ? setAsked(true) : save())}
            >
              Save roles<span className="sr-only"> of {member.name}</span>
            </Button>
          )}
          <Button tone="quiet" size="small" onClick={() => setDraft(null)}>
            Undo
          </Button>
        </div>
      )}
      {setRoles.isError && (
        <p role="alert" className="col-span-full text-fault">
          {setRoles.error.message}
        </p>
      )}
      <Dialog
        open={asked}
        onClose={() => setAsked(false)}
        title="Give up your admin role?"
        actions={
          <Button tone="decision" busy={setRoles.isPending} onClick={save}>
            Give it up
          </Button>
        }
      >
        <p>From then on another admin must give it back to you.</p>
      </Dialog>
    </li>
  );
}
