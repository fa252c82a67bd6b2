"use client";

import { useQuery } from "@tanstack/react-query";
import type { AccountSession } from "@/lib/api/account";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { LoadingState } from "../parts/states";
import { sessionsQuery, useEndSessions } from "../queries/people";
import { toDeviceWords } from "./device-words";

/** Where the account is signed in, and the way to end it there. */
export function SessionList() {
  const sessions = useQuery(sessionsQuery);
  const end = useEndSessions();
  const rows = sessions.data?.sessions ?? [];
  const others = rows.filter((session) => !session.current);
  if (sessions.isPending) {
    return <LoadingState label="Loading the sessions" onRetry={() => void sessions.refetch()} />;
  }
  if (sessions.data === undefined) {
    return (
      <FaultBar
        title="The sessions could not be read"
        actions={<Button onClick={() => void sessions.refetch()}>Try again</Button>}
      >
        {sessions.error.message}
      </FaultBar>
    );
  }
  return (
    <>
      <ul className="-mt-2.5">
        {rows.map((session) => (
          <SessionRow
            key={session.id}
            session={session}
            busy={end.isPending && end.variables.includes(session.id)}
            onEnd={() => end.mutate([session.id])}
          />
        ))}
      </ul>
      {others.length > 1 && (
        <Button
          className="mt-3"
          busy={end.isPending && end.variables.length > 1}
          onClick={() => end.mutate(others.map((session) => session.id))}
        >
          End all {others.length} others
        </Button>
      )}
      {others.length === 0 && (
        <p className="mt-2 text-small text-ink-2">You are signed in nowhere else.</p>
      )}
      {end.isError && (
        <p role="alert" className="mt-2 text-fault">
          {end.error.message}
        </p>
      )}
    </>
  );
}

interface SessionRowProps {
  session: AccountSession;
  busy: boolean;
  onEnd: () => void;
}

function SessionRow({ session, busy, onEnd }: SessionRowProps) {
  const device = toDeviceWords(session.user_agent);
  return (
    <li className="flex flex-wrap items-center gap-x-5 gap-y-1 border-t border-rule py-2.5 first:border-t-0">
      <span className="min-w-0 flex-[1_1_180px]" title={session.user_agent}>
        <span className="block font-semibold">{device}</span>
        <span className="figures block text-label text-ink-2">{session.ip}</span>
      </span>
      <span className="figures flex-[1_1_200px] text-label text-ink-2">
        since <Moment at={session.created_at} />
        <br />
        last seen <Moment at={session.last_seen_at} />
      </span>
      <span className="min-w-[80px] text-small">
        {session.current ? (
          "this one"
        ) : (
          <Button
            size="small"
            aria-label={`End the session of ${device}, ${session.ip}`}
            busy={busy}
            onClick={onEnd}
          >
            End
          </Button>
        )}
      </span>
    </li>
  );
}
