"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useState } from "react";
import { toApiPath } from "@/lib/api/client";
import { exportLab, type ArchivedSeries } from "@/lib/api/keeping";
import { Moment } from "../frame/moment";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { keepingQuery, useRemoveRecordings } from "../queries/keeping";
import { ReasonDialog } from "../runs/reason-dialog";
import { toHoldings, toRetentionWords } from "./keeping-words";
import { LabHead } from "./lab-head";

/** How long recordings stay, which may go, and the way to take everything along. */
export function KeepingScreen() {
  const keeping = useQuery(keepingQuery);
  const [removing, setRemoving] = useState<ArchivedSeries | null>(null);
  const remove = useRemoveRecordings();
  return (
    <>
      <LabHead title="Keeping" />
      <div className="max-w-[860px] space-y-8 px-gutter pb-10 max-md:px-phone">
        <section aria-labelledby="retention">
          <h2 id="retention">Recordings of archived series</h2>
          {keeping.isPending && (
            <LoadingState label="Loading" onRetry={() => void keeping.refetch()} />
          )}
          {keeping.isError && (
            <FaultBar
              title="The list could not be read"
              actions={<Button onClick={() => void keeping.refetch()}>Try again</Button>}
            >
              {keeping.error.message}
            </FaultBar>
          )}
          {keeping.data !== undefined && (
            <>
              <p className="mt-1 max-w-[66ch]">
                {toRetentionWords(keeping.data.retention_days)}{" "}
                <Link href="/lab">Change it in the settings.</Link> What a publication cites is
                never removed; results and history stay.
              </p>
              {keeping.data.series.length === 0 ? (
                <EmptyState title="Nothing in the archive holds recordings">
                  A series goes to the archive from its history.
                </EmptyState>
              ) : (
                <ul className="mt-3 border-t border-ink">
                  {keeping.data.series.map((one) => (
                    <Held key={one.id} series={one} onRemove={() => setRemoving(one)} />
                  ))}
                </ul>
              )}
            </>
          )}
        </section>
        <section aria-labelledby="export">
          <h2 id="export">Take everything along</h2>
          <p className="mt-1 max-w-[66ch]">
            One ZIP with every table, result, publication and recording of the lab, a manifest and
            the digest of each file. Passwords, keys of tokens and links are not in it. It is made
            while it is sent, and the trail tells of it.
          </p>
          <LinkButton className="mt-3" href={toApiPath(exportLab)} download>
            Download the lab, ZIP
          </LinkButton>
        </section>
      </div>
      {removing !== null && (
        <ReasonDialog
          title={`Remove the recordings of ${removing.number}`}
          words={`${toHoldings(removing)}. What is removed cannot be brought back, and the series cannot be taken back from the archive.`}
          act="Remove them for good"
          onGive={async (reason) => {
            await remove.mutateAsync({ seriesId: removing.id, reason });
          }}
          onClose={() => setRemoving(null)}
        />
      )}
    </>
  );
}

function Held({ series, onRemove }: { series: ArchivedSeries; onRemove: () => void }) {
  return (
    <li className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-rule py-3">
      <p className="mr-auto min-w-0">
        <Link href={`/series/${series.id}/history`} className="font-semibold">
          {series.loudspeaker}
        </Link>
        <span className="figures block text-label text-ink-2">
          {series.number} · archived <Moment at={series.archived_at} as="day" />
        </span>
        <span className="block text-small">
          {toHoldings(series)}
          {series.due_at !== null && (
            <>
              {" "}
              · removed after <Moment at={series.due_at} as="day" />
            </>
          )}
        </span>
      </p>
      {series.removable > 0 && (
        <Button
          size="small"
          onClick={onRemove}
          aria-label={`Remove the recordings of ${series.number}`}
        >
          Remove recordings
        </Button>
      )}
    </li>
  );
}
