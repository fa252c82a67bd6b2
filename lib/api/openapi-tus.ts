/** Uploads in the document: the tus protocol has its own headers, so these are written by hand. */
import type { ErrorCode } from "../errors/error-table";
import { UPLOADS_PATH } from "./runs";
import { RUN_ID_HEADER } from "./uploads";

type JsonObject = Record<string, unknown>;
type ToProblems = (codes: readonly ErrorCode[]) => Record<string, JsonObject>;

const header = (name: string, description: string, required = true): JsonObject => ({
  name,
  in: "header",
  required,
  description,
  schema: { type: "string" },
});
const RESUMABLE = header("Tus-Resumable", "1.0.0");
const OFFSET = {
  "Upload-Offset": { description: "Bytes that have arrived.", schema: { type: "integer" } },
};
const RUN_ID = {
  [RUN_ID_HEADER]: {
    description: "The run that the file became; with the last byte only.",
    schema: { type: "string", format: "uuid" },
  },
};
const CALLER: readonly ErrorCode[] = [
  "auth.required",
  "auth.token-invalid",
  "auth.forbidden",
  "request.origin",
  "request.invalid",
  "internal",
  "database.unavailable",
];
const OWN: readonly ErrorCode[] = [...CALLER, "upload.not-found", "upload.expired"];
/** What the last byte may bring to light. */
const FILE: readonly ErrorCode[] = [
  "audio.not-audio",
  "audio.empty",
  "audio.truncated",
  "audio.length-lies",
  "audio.format-unsupported",
  "audio.channel-missing",
  "audio.too-large",
  "table.not-readable",
  "table.column-missing",
  "table.too-large",
  "storage.full",
  "upload.too-large",
  "upload.offset",
];
const SECURITY = [{ token: [] }, { session: [] }];

export function toTusPaths(toProblems: ToProblems): Record<string, JsonObject> {
  const common = { tags: ["Uploads"], security: SECURITY };
  return {
    [UPLOADS_PATH]: {
      post: {
        ...common,
        operationId: "createUpload",
        summary: "Begin a resumable upload of a recording (tus 1.0)",
        description:
          "Upload-Metadata holds seriesId and fileName, and optionally slot, channel and, for a table (.csv, .tsv, .txt, .frd) whose head does not tell, columns as JSON, each base64.",
        parameters: [
          RESUMABLE,
          header("Upload-Length", "Bytes of the whole file."),
          header(
            "Upload-Metadata",
            "seriesId, fileName, slot, channel, columns; values in base64.",
          ),
        ],
        responses: {
          201: {
            description: "Begun; the bytes go to Location by PATCH.",
            headers: {
              Location: { schema: { type: "string" } },
              "Upload-Expires": {
                description: "When an unfinished upload goes.",
                schema: { type: "string" },
              },
            },
          },
          ...toProblems([
            ...CALLER,
            "not-found",
            "conflict.state",
            "audio.empty",
            "table.too-large",
            "upload.too-large",
            "storage.full",
          ]),
        },
      },
    },
    [`${UPLOADS_PATH}/{uploadId}`]: {
      parameters: [
        { name: "uploadId", in: "path", required: true, schema: { type: "string" } },
        RESUMABLE,
      ],
      head: {
        ...common,
        operationId: "getUploadOffset",
        summary: "How far an upload has come",
        responses: {
          200: { description: "Where to go on.", headers: { ...OFFSET, ...RUN_ID } },
          ...toProblems([...OWN, ...FILE]),
        },
      },
      patch: {
        ...common,
        operationId: "sendUploadBytes",
        summary: "Send bytes from an offset on; the last byte makes the file a run",
        parameters: [header("Upload-Offset", "Where these bytes begin.")],
        requestBody: { required: true, content: { "application/offset+octet-stream": {} } },
        responses: {
          204: { description: "The bytes are here.", headers: { ...OFFSET, ...RUN_ID } },
          ...toProblems([...OWN, ...FILE, "request.media-type"]),
        },
      },
      delete: {
        ...common,
        operationId: "stopUpload",
        summary: "Stop an upload, one's own or one that a colleague left; nothing of it stays",
        responses: {
          204: { description: "It is gone." },
          ...toProblems([...OWN, "conflict.state"]),
        },
      },
    },
  };
}
