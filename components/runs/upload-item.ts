/** A file on its way, as the page shows it. */
export type UploadState =
  /** Chosen, its turn comes. */
  | "waiting"
  | "sending"
  /** Stopped by the person; its bytes are kept. */
  | "stopped"
  /** The connection was lost; it goes on by itself. */
  | "retrying"
  | "failed"
  | "done";

export interface UploadItem {
  /** Ours, for the page; not the server's. */
  id: string;
  fileName: string;
  bytes: number;
  sentBytes: number;
  /** Bytes per second over the last moments; null until known. */
  bytesPerS: number | null;
  slot: string | null;
  state: UploadState;
  /** Why it failed, in the server's words. */
  fault: string | null;
}

/** "uploading, 2 s left", "stopped; its bytes are kept". */
export function toUploadWords(item: UploadItem): string {
  switch (item.state) {
    case "waiting":
      return "waits for its turn";
    case "sending": {
      const left = item.bytes - item.sentBytes;
      if (left <= 0) return "received, being checked in";
      if (item.bytesPerS === null || item.bytesPerS <= 0) return "uploading";
      return `uploading, ${toTimeLeft(left / item.bytesPerS)} left`;
    }
    case "stopped":
      return "stopped; what arrived is kept";
    case "retrying":
      return "no connection; goes on by itself";
    case "failed":
      return item.fault ?? "refused";
    case "done":
      return "received";
  }
}

function toTimeLeft(seconds: number): string {
  const whole = Math.max(1, Math.ceil(seconds));
  if (whole < 60) return `${whole}\u00a0s`;
  return `${Math.ceil(whole / 60)}\u00a0min`;
}

/** Share that arrived, 0 to 1. */
export const toUploadShare = (item: UploadItem): number =>
  item.bytes === 0 ? 0 : Math.min(1, item.sentBytes / item.bytes);
