/** Resumable uploads by the tus protocol 1.0 (lib/api/runs.ts, uploadMetadataSchema). */
import { handleUpload } from "../../../../_server/uploads/handle-upload";

export const POST = handleUpload;
export const PATCH = handleUpload;
export const HEAD = handleUpload;
export const DELETE = handleUpload;
export const OPTIONS = handleUpload;
