/** A stored recording as a download, whole or one range of it. */
import { toDisposition } from "../../lib/http/disposition";
import { parseRange } from "../../lib/http/range";
import { getStore } from "./storage";

/** @throws AppError "storage.missing" */
export async function answerFile(
  request: Request,
  file: { digest: string; bytes: number; fileName: string },
): Promise<Response> {
  const range = parseRange(request.headers.get("range"), file.bytes);
  const headers = new Headers({
    "content-type": "application/octet-stream",
    "content-disposition": toDisposition(file.fileName),
    "accept-ranges": "bytes",
    etag: `"${file.digest}"`,
    "cache-control": "private, no-cache, no-transform",
  });
  if (range === "unsatisfiable") {
    headers.set("content-range", `bytes */${file.bytes}`);
    return new Response(null, { status: 416, headers });
  }
  const body = await getStore().stream(file.digest, range ?? undefined);
  if (range === null) return new Response(body, { headers });
  headers.set("content-range", `bytes ${range.from}-${range.to}/${file.bytes}`);
  return new Response(body, { status: 206, headers });
}
