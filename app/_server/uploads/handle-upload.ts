/** One tus request: who asks, whose upload it is, and what becomes of it. */
import { stat } from "node:fs/promises";
import { inLab } from "../../../db/in-lab";
import { notifyChange } from "../../../db/queries/changes";
import { findUpload, setReceived, type UploadRow } from "../../../db/queries/uploads";
import { RUN_ID_HEADER, UPLOAD_ID } from "../../../lib/api/uploads";
import { getEnvironment } from "../../../lib/config/environment";
import { AppError, FileError } from "../../../lib/errors/app-error";
import { checkCapability, findCaller, type LabCaller, toScope } from "../caller";
import { getDatabase } from "../database";
import { answerError, checkCookieWrite, toRequestId } from "../handle";
import { follow } from "../queues";
import { getStore, stagedPath } from "../storage";
import { createUpload, parseMetadata } from "./create-upload";
import { discardUpload, type FinishTools, finishUpload, noSuchUpload } from "./finish-upload";
import { requireRoom } from "./room";
import { serially } from "./serially";
import { toUploadError } from "./tus-problem";
import { handleTus, type UploadHooks } from "./tus-server";

export async function handleUpload(request: Request): Promise<Response> {
  const requestId = toRequestId(request.headers);
  try {
    const response = await answer(request);
    response.headers.set("x-request-id", requestId);
    response.headers.set("cache-control", "no-store");
    return response;
  } catch (error) {
    return answerError(error, request, requestId);
  }
}

async function answer(request: Request): Promise<Response> {
  if (request.method === "OPTIONS") return tus(request, null);
  const caller = checkCapability(await findCaller(getDatabase(), request.headers), "capture");
  checkCookieWrite(request, caller);
  if (request.method === "POST") return tus(request, caller);
  const upload = await getUpload(caller, request);
  if (upload.run_id !== null) return answerFinished(request, upload, upload.run_id);
  const complete = request.method === "HEAD" && (await isComplete(upload));
  if (complete) {
    // All bytes came, but the answer or we were lost before they became a run.
    const runId = await finish(caller, upload);
    return answerFinished(request, upload, runId);
  }
  return tus(request, caller, upload);
}

/**
 * The upload named by the address. Only who began it goes on with it; left behind in another
 * browser, whoever captures in the lab may take it away.
 *
 * @throws AppError "upload.not-found", "upload.expired"
 */
async function getUpload(caller: LabCaller, request: Request): Promise<UploadRow> {
  const id = new URL(request.url).pathname.split("/").at(-1) ?? "";
  const row = UPLOAD_ID.test(id)
    ? await inLab(getDatabase(), toScope(caller), (trx) => findUpload(trx, caller.labId, id))
    : null;
  const mine = row?.account_id === caller.accountId || request.method === "DELETE";
  if (row === null || !mine) throw noSuchUpload();
  if (row.run_id === null && row.expires_at <= new Date()) {
    throw new AppError(
      "upload.expired",
      "This upload was not finished within its day and expired. Send the file again.",
    );
  }
  return row;
}

/** The client lost our last answer: tell it again. */
function answerFinished(request: Request, upload: UploadRow, runId: string): Response {
  if (request.method === "DELETE") {
    throw new AppError(
      "conflict.state",
      "The upload is finished; exclude or remove the recording.",
    );
  }
  const headers = {
    "tus-resumable": "1.0.0",
    "upload-offset": String(upload.bytes),
    "upload-length": String(upload.bytes),
    [RUN_ID_HEADER]: runId,
  };
  return new Response(null, { status: request.method === "HEAD" ? 200 : 204, headers });
}

async function tus(
  request: Request,
  caller: LabCaller | null,
  upload?: UploadRow,
): Promise<Response> {
  let id = upload?.id ?? null;
  const hooks: UploadHooks = {
    thrown: undefined,
    onCreate: async (created) => {
      if (caller === null) throw noSuchUpload();
      const metadata = parseMetadata(created.metadata);
      requireRoom(await getStore().freeBytes(), created.bytes);
      await inLab(getDatabase(), toScope(caller), (trx) =>
        createUpload(
          trx,
          caller,
          { id: created.id, bytes: created.bytes, metadata },
          { maxUploadBytes: getEnvironment().maxUploadBytes, now: new Date() },
        ),
      );
      id = created.id;
    },
    onFinish: async (finishedId) => {
      if (caller === null) throw noSuchUpload();
      const row = await inLab(getDatabase(), toScope(caller), (trx) =>
        findUpload(trx, caller.labId, finishedId),
      );
      if (row === null) throw noSuchUpload();
      return { [RUN_ID_HEADER]: await finish(caller, row) };
    },
  };
  const response = await handleTus(request, hooks);
  if (response.status < 400) {
    if (caller !== null && id !== null) await afterRequest(request, caller, id);
    return response;
  }
  const error = toUploadError(hooks.thrown, response.status, await response.text());
  if (caller !== null && id !== null) {
    // Refused for what it is: nothing stays. Otherwise what came waits for the rest.
    if (error instanceof FileError) await discardUpload(tools(), caller, id);
    else await rememberReceived(caller, id);
  }
  throw error;
}

async function afterRequest(request: Request, caller: LabCaller, id: string): Promise<void> {
  if (request.method === "DELETE") await discardUpload(tools(), caller, id);
  else if (request.method !== "HEAD") await rememberReceived(caller, id);
}

/** For the list of whoever else looks at the series. */
async function rememberReceived(caller: LabCaller, id: string): Promise<void> {
  const size = await stat(stagedPath(id)).then(
    (found) => found.size,
    () => null,
  );
  if (size === null) return;
  await inLab(getDatabase(), toScope(caller), async (trx) => {
    const row = await findUpload(trx, caller.labId, id);
    if (row === null || row.finished_at !== null) return;
    await setReceived(trx, caller.labId, id, Math.min(size, row.bytes));
    await notifyChange(trx, { labId: caller.labId, seriesId: row.series_id });
  });
}

/** Two requests that bring the last byte at once make one run. */
function finish(caller: LabCaller, upload: UploadRow): Promise<string> {
  return serially(upload.id, () => finishUpload(tools(), caller, upload));
}

async function isComplete(upload: UploadRow): Promise<boolean> {
  return stat(stagedPath(upload.id)).then(
    (found) => found.size === upload.bytes,
    () => false,
  );
}

function tools(): FinishTools {
  return { db: getDatabase(), store: getStore(), stagedPath, follow };
}
