"use client";

import { useQuery } from "@tanstack/react-query";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { LoadingState } from "../parts/states";
import { labQuery } from "../queries/people";
import { LabHead } from "./lab-head";
import { SettingsForm } from "./settings-form";
import { toSettingRows } from "./settings-words";

interface SettingsScreenProps {
  mayAdminister: boolean;
  mostUploadMb: number;
}

/** How the lab works: an admin sets it, everybody may read it. */
export function SettingsScreen({ mayAdminister, mostUploadMb }: SettingsScreenProps) {
  const lab = useQuery(labQuery);
  return (
    <>
      <LabHead title="Settings" line={lab.data?.name} />
      <div className="px-gutter pb-10 max-md:px-phone">
        {lab.isPending && (
          <LoadingState label="Loading the settings" onRetry={() => void lab.refetch()} />
        )}
        {lab.isError && lab.data === undefined && (
          <FaultBar
            title="The settings could not be read"
            actions={<Button onClick={() => void lab.refetch()}>Try again</Button>}
          >
            {lab.error.message}
          </FaultBar>
        )}
        {lab.data !== undefined && mayAdminister && (
          <SettingsForm
            lab={lab.data}
            mostUploadMb={mostUploadMb}
            onReread={async () => (await lab.refetch()).data ?? null}
          />
        )}
        {lab.data !== undefined && !mayAdminister && (
          <>
            <dl className="grid max-w-[860px] gap-x-5 sm:grid-cols-[280px_minmax(0,1fr)]">
              {toSettingRows(lab.data).map(({ label, value }) => (
                <div key={label} className="contents">
                  <dt className="figures border-t border-rule pt-2.5 text-label text-ink-2 sm:pb-2.5">
                    {label}
                  </dt>
                  <dd className="pb-2.5 sm:border-t sm:border-rule sm:pt-2">{value}</dd>
                </div>
              ))}
            </dl>
            <p className="mt-3 text-small text-ink-2">An admin of the lab changes these.</p>
          </>
        )}
      </div>
    </>
  );
}
