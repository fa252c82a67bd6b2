/** What the tus requests of UPLOADS_PATH have in common with the rest of the API. */

/** An unfinished upload is kept this long. */
export const UPLOAD_LIFETIME_MS = 24 * 3600 * 1000;

/** Answer to the last byte: the run that the upload became. */
export const RUN_ID_HEADER = "tidemark-run-id";

/** Ids of uploads: ours, 32 hex digits. */
export const UPLOAD_ID = /^[0-9a-f]{32}$/;
