/** Sends one file by the tus protocol: goes on after a lost connection and after a reload. */
import { DetailedError, Upload } from "tus-js-client";
import { problemSchema } from "@/lib/api/common";
import { UPLOADS_PATH } from "@/lib/api/runs";
import type { ChosenFile, StartTransfer } from "./upload-controller";

/** The first tries follow quickly; then one each 15 s, for an hour. */
const RETRY_DELAYS_MS = [0, 1000, 3000, 5000, ...Array.from({ length: 240 }, () => 15_000)];
const CHUNK_BYTES = 16 * 1024 * 1024;
const NOT_SENT = "The file could not be sent. Check the connection and try again.";
const NOT_REMOVED = "It was not removed. Check the connection and try again.";
/** No answer, a lock that another request still holds, or a fault of the moment. */
const PASSING = new Set([0, 423, 502, 503, 504]);

/** @param seriesId the series that the files belong to; the same file for another one starts anew. */
export function makeTusTransfer(seriesId: string): StartTransfer {
  return (chosen, events) => {
    const { file, slot, columns, channel } = chosen;
    const upload = new Upload(file, {
      endpoint: UPLOADS_PATH,
      chunkSize: CHUNK_BYTES,
      retryDelays: RETRY_DELAYS_MS,
      removeFingerprintOnSuccess: true,
      metadata: {
        seriesId,
        fileName: file.name,
        ...(slot === null ? {} : { slot }),
        ...(columns === undefined ? {} : { columns: JSON.stringify(columns) }),
        ...(channel === undefined ? {} : { channel: String(channel) }),
      },
      fingerprint: () => Promise.resolve(toFingerprint(seriesId, chosen)),
      onProgress: (sent) => events.onProgress(sent),
      onShouldRetry: (error) => {
        const again = PASSING.has(error.originalResponse?.getStatus() ?? 0);
        if (again) events.onRetrying();
        return again;
      },
      onError: (error) => events.onFault(toFaultWords(error, NOT_SENT)),
      onSuccess: ({ lastResponse }) =>
        events.onDone(lastResponse.getHeader("tidemark-run-id") ?? null),
    });
    void upload.findPreviousUploads().then((earlier) => {
      const [last] = earlier;
      if (last !== undefined) upload.resumeFromPreviousUpload(last);
      upload.start();
    });
    return {
      stop: () => upload.abort(),
      discard: () => upload.abort(true).catch(() => undefined),
    };
  };
}

/** Has the server forget an upload that was begun elsewhere. @throws Error in the server's words */
export async function removeUpload(id: string): Promise<void> {
  try {
    await Upload.terminate(`${UPLOADS_PATH}/${id}`);
  } catch (error) {
    throw new Error(error instanceof Error ? toFaultWords(error, NOT_REMOVED) : NOT_REMOVED, {
      cause: error,
    });
  }
}

/** Name, size and time of change tell a file from a new recording under the old name. */
export function toFingerprint(seriesId: string, { file, slot, columns }: ChosenFile): string {
  const mapped = columns === undefined ? [] : [JSON.stringify(columns)];
  const parts = [seriesId, slot ?? "", file.name, file.size, file.lastModified, ...mapped];
  return ["tidemark", ...parts].join("|");
}

/** The server's own sentence where it sent one. */
function toFaultWords(error: Error, otherwise: string): string {
  if (error instanceof DetailedError) {
    const parsed = problemSchema.safeParse(parseJson(error.originalResponse?.getBody() ?? ""));
    if (parsed.success) return parsed.data.detail;
  }
  return otherwise;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return undefined;
  }
}
