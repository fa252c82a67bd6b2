"use client";

import { useQuery } from "@tanstack/react-query";
import type { Token } from "@/lib/api/tokens";
import { useLabSession } from "../frame/lab-session";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { membersQuery, tokensQuery } from "../queries/people";
import { LabHead } from "./lab-head";
import { TokenForm } from "./token-form";
import { TokenHowTo } from "./token-how-to";
import { TokenRow } from "./token-row";
import { toTokenState } from "./token-words";

interface TokensScreenProps {
  /** An admin sees the tokens of everybody. */
  seesAll: boolean;
  publicUrl: string;
}

/** Keys for scripts. */
export function TokensScreen({ seesAll, publicUrl }: TokensScreenProps) {
  const tokens = useQuery(tokensQuery);
  const all = tokens.data?.tokens ?? [];
  const now = new Date(tokens.dataUpdatedAt);
  const inUse = all.filter((token) => toTokenState(token, now) === "in use");
  const ended = all.filter((token) => toTokenState(token, now) !== "in use");
  return (
    <>
      <LabHead
        title="Tokens"
        line={
          tokens.data === undefined
            ? undefined
            : `${inUse.length} in use, ${seesAll ? "of everybody in the lab" : "yours"}`
        }
      />
      <div className="grid items-start gap-x-10 gap-y-8 px-gutter pb-10 max-md:px-phone lg:grid-cols-[minmax(0,1fr)_400px]">
        <div className="min-w-0">
          {tokens.isPending && (
            <LoadingState label="Loading the tokens" onRetry={() => void tokens.refetch()} />
          )}
          {tokens.isError && tokens.data === undefined && (
            <FaultBar
              title="The tokens could not be read"
              actions={<Button onClick={() => void tokens.refetch()}>Try again</Button>}
            >
              {tokens.error.message}
            </FaultBar>
          )}
          {tokens.data !== undefined && all.length === 0 && (
            <EmptyState title="No tokens yet">
              A token lets a script do what you do here: enter series, send recordings, read
              results. It is shown once, when it is made.
            </EmptyState>
          )}
          <TokenList title="In use" tokens={inUse} seesAll={seesAll} now={now} />
          <TokenList title="Expired or revoked" tokens={ended} seesAll={seesAll} now={now} />
        </div>
        <div className="grid min-w-0 grid-cols-[minmax(0,1fr)] gap-8">
          <TokenForm />
          <TokenHowTo publicUrl={publicUrl} />
        </div>
      </div>
    </>
  );
}

interface TokenListProps {
  title: string;
  tokens: readonly Token[];
  seesAll: boolean;
  now: Date;
}

function TokenList({ title, tokens, seesAll, now }: TokenListProps) {
  const { account, roles } = useLabSession();
  const members = useQuery({ ...membersQuery, enabled: seesAll });
  if (tokens.length === 0) return null;
  const rolesOf = (ownerId: string) => {
    if (ownerId === account.id) return roles;
    if (members.data === undefined) return null;
    return members.data.members.find((member) => member.id === ownerId)?.roles ?? [];
  };
  return (
    <section className="not-first:mt-7">
      <h2>{title}</h2>
      <ul className="mt-2 border-y border-rule">
        {tokens.map((token) => (
          <TokenRow
            key={token.id}
            token={token}
            ownerRoles={rolesOf(token.owner.id)}
            showOwner={seesAll}
            now={now}
          />
        ))}
      </ul>
    </section>
  );
}
