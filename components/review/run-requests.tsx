"use client";

import { formatLevel } from "@/lib/charts/format";
import type { RunRequest } from "@/lib/review/review-schema";
import { Button } from "../parts/button";
import { VerdictMark } from "../parts/verdict";
import { useWithdrawRequest } from "../queries/review";

interface RunRequestsProps {
  seriesId: string;
  requests: readonly RunRequest[];
  mayDecide: boolean;
}

/** Runs that were asked for and are in, or still awaited. */
export function RunRequests({ seriesId, requests, mayDecide }: RunRequestsProps) {
  const withdraw = useWithdrawRequest(seriesId);
  const standing = requests.filter((request) => request.withdrawn_at === null);
  if (standing.length === 0) return null;
  return (
    <section aria-label="Runs asked for" className="border-t border-rule py-3">
      <h3>Runs asked for</h3>
      <ul className="mt-1.5 grid gap-2 text-small">
        {standing.map((request) => (
          <li key={request.id}>
            <span className="flex items-center gap-2">
              <VerdictMark kind={request.fulfilled ? "ok" : "wait"} size={13} />
              <b className="figures font-semibold">{formatLevel(request.level_dB)}</b>{" "}
              {request.variant ?? request.kind}
              <span className="text-ink-2">{request.fulfilled ? "is in" : "is awaited"}</span>
              {mayDecide && !request.fulfilled && (
                <Button
                  className="ml-auto"
                  tone="quiet"
                  size="small"
                  busy={withdraw.isPending}
                  aria-label={`Withdraw the ${formatLevel(request.level_dB)} run`}
                  onClick={() => withdraw.mutate(request.id)}
                >
                  Withdraw
                </Button>
              )}
            </span>
            <span className="block text-ink-2">
              {request.by.name}: “{request.reason}”
            </span>
          </li>
        ))}
      </ul>
      {withdraw.error !== null && (
        <p role="alert" className="mt-1.5 text-small text-fault">
          {withdraw.error.message}
        </p>
      )}
    </section>
  );
}
