import { formatBytes } from "@/lib/charts/format";
import type { LevelPaint } from "@/lib/charts/tokens";
import { Button } from "../parts/button";
import { ProgressBar } from "../parts/progress-bar";
import type { RunActs } from "./run-acts";
import { toUploadShare, type UploadItem } from "./upload-item";

interface ReceivedProps {
  label: string;
  bytes: number;
  /** Null once everything has arrived. */
  upload: UploadItem | null;
  paint: LevelPaint | undefined;
}

/** The bar fills with the level's water: "1.2 MB of 1.9 MB". */
export function Received({ label, bytes, upload, paint }: ReceivedProps) {
  const words =
    upload === null || upload.state === "done"
      ? formatBytes(bytes)
      : `${formatBytes(upload.sentBytes)} of ${formatBytes(upload.bytes)}`;
  return (
    <span className="figures inline-flex items-center gap-2.5 text-[13px]/5 whitespace-nowrap">
      <ProgressBar
        label={`received of ${label}`}
        done={upload === null ? 1 : toUploadShare(upload)}
        paint={paint ?? null}
        say={words}
        className="block w-[104px] flex-none max-xl:w-16"
      />
      {words}
    </span>
  );
}

/** Stop, go on, try again, dismiss: as the upload stands. */
export function UploadButtons({ upload, acts }: { upload: UploadItem; acts: RunActs }) {
  const { id, fileName, state } = upload;
  if (state === "done") return null;
  const going = state === "sending" || state === "retrying" || state === "waiting";
  return (
    <span className="inline-flex gap-1">
      {going ? (
        <Button
          tone="quiet"
          size="small"
          aria-label={`Stop sending ${fileName}`}
          onClick={() => acts.stopUpload(id)}
        >
          Stop
        </Button>
      ) : (
        <>
          <Button
            tone="quiet"
            size="small"
            aria-label={`${state === "failed" ? "Try again to send" : "Go on with"} ${fileName}`}
            onClick={() => acts.goOnUpload(id)}
          >
            {state === "failed" ? "Try again" : "Go on"}
          </Button>
          <Button
            tone="quiet"
            size="small"
            aria-label={`Dismiss ${fileName}`}
            onClick={() => acts.discardUpload(id)}
          >
            Dismiss
          </Button>
        </>
      )}
    </span>
  );
}
