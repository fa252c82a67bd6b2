"use client";

import { useRouter } from "next/navigation";
import { useEffect, useRef, useState } from "react";
import type { ColumnChoice } from "@/lib/series/table-columns";
import { formatBytes } from "@/lib/charts/format";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { ProgressBar } from "../parts/progress-bar";
import { toUploadShare, toUploadWords, type UploadItem } from "../runs/upload-item";
import { useUploads } from "../runs/use-uploads";

export interface FileToSend {
  file: string;
  slot: string;
  channel: number;
  columns: ColumnChoice | null;
  /** From the folder or its archive. */
  open: () => Promise<Blob>;
}

interface SendFilesProps {
  seriesId: string;
  files: readonly FileToSend[];
}

/** Every recording on its way to its place; afterwards the page of the runs. */
export function SendFiles({ seriesId, files }: SendFilesProps) {
  const router = useRouter();
  const { uploads, controller } = useUploads(seriesId);
  const [unpacked, setUnpacked] = useState(0);
  const [fault, setFault] = useState<string | null>(null);
  const begun = useRef(false);
  const runsPath = `/series/${seriesId}/runs`;

  // Sending begins with the page, once; there is nobody to press a button again.
  useEffect(() => {
    if (begun.current) return;
    begun.current = true;
    const send = async (): Promise<void> => {
      for (const { file, slot, channel, columns, open } of files) {
        const blob = await open();
        const sent = { file: new File([blob], file), slot, shownSlot: slot, channel };
        controller.add([columns === null ? sent : { ...sent, columns }]);
        setUnpacked((count) => count + 1);
      }
    };
    send().catch((error: unknown) => {
      setFault(error instanceof Error ? error.message : "The folder could not be read.");
    });
  }, [controller, files]);

  const done = unpacked === files.length && uploads.length === 0;
  useEffect(() => {
    if (done) router.push(runsPath);
  }, [done, router, runsPath]);

  const sent = files.length - uploads.length - (files.length - unpacked);
  return (
    <div className="max-w-[860px] space-y-5 px-gutter pt-5 pb-10 max-md:px-phone">
      <p aria-live="polite">
        <b>
          {sent} of {files.length} recordings are in.
        </b>{" "}
        <span className="text-ink-2">Leave this page open until all are.</span>
      </p>
      {fault !== null && (
        <FaultBar title="Not every recording could be read">
          {fault} What is in stays: send the rest by hand.
        </FaultBar>
      )}
      <ul className="border-t border-ink">
        {uploads.map((upload) => (
          <Going key={upload.id} upload={upload} onAgain={() => controller.goOn(upload.id)} />
        ))}
      </ul>
      <LinkButton href={runsPath}>To the runs of the series</LinkButton>
    </div>
  );
}

function Going({ upload, onAgain }: { upload: UploadItem; onAgain: () => void }) {
  return (
    <li className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-rule py-2">
      <span className="figures mr-auto min-w-0 text-figure break-all">{upload.fileName}</span>
      <ProgressBar
        label={`received of ${upload.fileName}`}
        done={toUploadShare(upload)}
        paint={null}
        say={`${formatBytes(upload.sentBytes)} of ${formatBytes(upload.bytes)}`}
        className="block w-[104px] flex-none"
      />
      <span className="text-small text-ink-2">{toUploadWords(upload)}</span>
      {upload.state === "failed" && (
        <Button size="small" aria-label={`Try again to send ${upload.fileName}`} onClick={onAgain}>
          Try again
        </Button>
      )}
    </li>
  );
}
