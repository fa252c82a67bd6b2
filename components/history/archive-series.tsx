"use client";

import { useRouter } from "next/navigation";
import { useState } from "react";
import type { SeriesView } from "@/lib/api/series";
import { Button } from "../parts/button";
import { Dialog } from "../parts/dialog";
import { useRemoveSeries, useRestoreSeries } from "../queries/series";

/** Out of the way: an empty series is deleted, one with recordings goes to the archive and can come back. */
export function ArchiveSeries({ series }: { series: SeriesView }) {
  const router = useRouter();
  const [asked, setAsked] = useState(false);
  const remove = useRemoveSeries(series.id);
  const restore = useRestoreSeries(series.id);
  const empty = !series.plan_locked;
  if (series.archived_at !== null) {
    return (
      <div className="border-t border-rule pt-4">
        <Button busy={restore.isPending} onClick={() => restore.mutate()}>
          Take it back from the archive
        </Button>
        {restore.isError && (
          <p role="alert" className="mt-2 text-fault">
            {restore.error.message}
          </p>
        )}
      </div>
    );
  }
  return (
    <div className="border-t border-rule pt-4">
      <Button onClick={() => setAsked(true)}>
        {empty ? "Delete this series" : "Archive this series"}
      </Button>
      <Dialog
        open={asked}
        onClose={() => setAsked(false)}
        title={empty ? `Delete ${series.number}?` : `Archive ${series.number}?`}
        actions={
          <Button
            tone="decision"
            busy={remove.isPending}
            onClick={() =>
              remove.mutate(undefined, {
                onSuccess: ({ outcome }) => {
                  setAsked(false);
                  if (outcome === "deleted") router.push("/series");
                },
              })
            }
          >
            {empty ? "Delete it" : "Archive it"}
          </Button>
        }
      >
        <p>
          {empty
            ? "It holds no recording. Its plan goes with it, and its number is not given again."
            : "It leaves the list. Recordings, results and history stay, and it can be taken back."}
        </p>
        {remove.isError && (
          <p role="alert" className="mt-2 text-fault">
            {remove.error.message}
          </p>
        )}
      </Dialog>
    </div>
  );
}
