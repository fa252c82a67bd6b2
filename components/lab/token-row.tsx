"use client";

import { useState } from "react";
import type { Token } from "@/lib/api/tokens";
import type { Role } from "@/lib/roles/roles";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { joinClasses } from "../parts/join-classes";
import { useRevokeToken } from "../queries/people";
import { toTokenRights, toTokenState } from "./token-words";

interface TokenRowProps {
  token: Token;
  /** Roles of its owner now; null while they are not known. */
  ownerRoles: readonly Role[] | null;
  showOwner: boolean;
  now: Date;
}

/** One token: what it may do, when it was used, and the end of it. */
export function TokenRow({ token, ownerRoles, showOwner, now }: TokenRowProps) {
  const state = toTokenState(token, now);
  return (
    <li className="flex flex-wrap items-center gap-x-5 gap-y-1.5 border-t border-rule py-3 first:border-t-0">
      <div className="min-w-0 flex-[1_1_200px]">
        <p
          className={joinClasses(
            "text-[16px]/5 font-[680] break-words",
            state !== "in use" && "text-ink-2",
          )}
        >
          {token.name}
        </p>
        <p className="figures text-label text-ink-2">
          {token.prefix}…{showOwner && `, ${token.owner.name}`}
        </p>
      </div>
      <div className="flex-[1_1_150px] text-small">
        <Rights given={token.roles} ownerRoles={ownerRoles} />
      </div>
      <div className="figures flex-[1_1_190px] text-label text-ink-2">
        {token.last_used_at === null ? (
          "never used"
        ) : (
          <>
            last used <Moment at={token.last_used_at} />
          </>
        )}
        <br />
        <TokenEnd token={token} state={state} />
      </div>
      <div className="min-w-[80px]">
        {state === "in use" && <RevokeToken token={token} showOwner={showOwner} />}
      </div>
    </li>
  );
}

function Rights({
  given,
  ownerRoles,
}: {
  given: readonly Role[];
  ownerRoles: readonly Role[] | null;
}) {
  if (ownerRoles === null) return given.join(", ");
  const { counts, asleep } = toTokenRights(given, ownerRoles);
  return (
    <>
      {counts.join(", ")}
      {asleep.length > 0 && (
        <span className="block text-ink-2">
          not {asleep.join(", ")}: its owner does not hold {asleep.length === 1 ? "it" : "them"} now
        </span>
      )}
    </>
  );
}

function TokenEnd({ token, state }: { token: Token; state: ReturnType<typeof toTokenState> }) {
  if (token.revoked_at !== null) {
    return (
      <>
        revoked <Moment at={token.revoked_at} />
      </>
    );
  }
  if (token.expires_at === null) return "good until it is revoked";
  return (
    <>
      {state === "expired" ? "expired" : "good until"} <Moment at={token.expires_at} as="day" />
    </>
  );
}

function RevokeToken({ token, showOwner }: { token: Token; showOwner: boolean }) {
  const revoke = useRevokeToken();
  const [asked, setAsked] = useState(false);
  return (
    <>
      <Button
        size="small"
        aria-label={`Revoke the token ${token.name}`}
        onClick={() => setAsked(true)}
      >
        Revoke
      </Button>
      <Dialog
        open={asked}
        onClose={() => {
          setAsked(false);
          revoke.reset();
        }}
        title={`Revoke “${token.name}”?`}
        actions={
          <Button
            tone="decision"
            busy={revoke.isPending}
            onClick={() => revoke.mutate(token.id, { onSuccess: () => setAsked(false) })}
          >
            Revoke it
          </Button>
        }
      >
        <p>
          Scripts that use it are refused from now on, and it cannot be taken back.
          {showOwner && ` Its owner is ${token.owner.name}.`}
        </p>
        {revoke.isError && (
          <p role="alert" className="mt-2 text-fault">
            {revoke.error.message}
          </p>
        )}
      </Dialog>
    </>
  );
}
