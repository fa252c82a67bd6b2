/** A tus client of a few lines, so that a test decides where an upload is cut. */
import { setTimeout as sleep } from "node:timers/promises";
import { connect } from "node:net";

export interface TusTarget {
  /** Address of the web server. */
  url: string;
  token: string;
}

const TUS = { "tus-resumable": "1.0.0" };

export const toMetadata = (metadata: Record<string, string>): string =>
  Object.entries(metadata)
    .map(([key, value]) => `${key} ${Buffer.from(value).toString("base64")}`)
    .join(",");

/** The creation; the answer as it came. */
export function createTus(
  { url, token }: TusTarget,
  bytes: number,
  metadata: Record<string, string>,
): Promise<Response> {
  return fetch(`${url}/api/v1/uploads`, {
    method: "POST",
    headers: {
      ...TUS,
      authorization: `Bearer ${token}`,
      "upload-length": String(bytes),
      "upload-metadata": toMetadata(metadata),
    },
  });
}

export function headTus({ url, token }: TusTarget, location: string): Promise<Response> {
  return fetch(`${url}${location}`, {
    method: "HEAD",
    headers: { ...TUS, authorization: `Bearer ${token}` },
  });
}

export function patchTus(
  { url, token }: TusTarget,
  location: string,
  offset: number,
  bytes: Uint8Array<ArrayBuffer>,
): Promise<Response> {
  return fetch(`${url}${location}`, {
    method: "PATCH",
    headers: {
      ...TUS,
      authorization: `Bearer ${token}`,
      "upload-offset": String(offset),
      "content-type": "application/offset+octet-stream",
    },
    body: bytes,
  });
}

/** Sends some of what it announces, then cuts the connection. */
export async function patchAndCut(
  { url, token }: TusTarget,
  location: string,
  offset: number,
  bytes: Uint8Array,
  sentBytes: number,
): Promise<void> {
  const { hostname, port, host } = new URL(url);
  const socket = connect(Number(port), hostname);
  socket.on("error", () => undefined);
  const head = [
    `PATCH ${location} HTTP/1.1`,
    `host: ${host}`,
    `authorization: Bearer ${token}`,
    "tus-resumable: 1.0.0",
    `upload-offset: ${offset}`,
    "content-type: application/offset+octet-stream",
    `content-length: ${bytes.length}`,
    "",
    "",
  ].join("\r\n");
  socket.write(head);
  await new Promise<void>((resolve) => {
    socket.write(bytes.subarray(0, sentBytes), () => resolve());
  });
  // The bytes have left us; the server takes them in before it sees the end.
  await sleep(100);
  socket.destroy();
}

/** Creation and bytes in one go. @returns the id of the run. */
export async function uploadWhole(
  target: TusTarget,
  bytes: Uint8Array<ArrayBuffer>,
  metadata: Record<string, string>,
): Promise<string> {
  const created = await createTus(target, bytes.length, metadata);
  if (created.status !== 201)
    throw new Error(`creation: ${created.status} ${await created.text()}`);
  const location = created.headers.get("location") ?? "";
  const sent = await patchTus(target, location, 0, bytes);
  const runId = sent.headers.get("tidemark-run-id");
  if (runId === null) throw new Error(`upload: ${sent.status} ${await sent.text()}`);
  return runId;
}
