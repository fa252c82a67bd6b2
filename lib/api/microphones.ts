import { z } from "zod";
import { defineOperation } from "./operation";

export const LARGEST_MICROPHONE_FILE_BYTES = 1_000_000;

export const microphoneFileSchema = z.object({
  file_name: z.string(),
  /** What a plan names the file by. */
  digest: z.string(),
  points: z.number().int(),
  from_Hz: z.number(),
  to_Hz: z.number(),
  lowest_dB: z.number(),
  highest_dB: z.number(),
});
export type MicrophoneFile = z.infer<typeof microphoneFileSchema>;

/** The body is the file itself: frequency and level, one pair a line. Plans then name its digest. */
export const sendMicrophoneFile = defineOperation({
  id: "sendMicrophoneFile",
  method: "POST",
  path: "/api/v1/microphone-files",
  summary: "Send a microphone's response or correction, for plans to name",
  access: "capture",
  query: z.strictObject({ file_name: z.string().trim().min(1).max(200) }),
  bodyMediaType: "text/plain",
  status: 201,
  answer: microphoneFileSchema,
  errors: ["request.invalid", "microphone.not-readable", "upload.too-large", "storage.full"],
});

export const microphoneOperations = [sendMicrophoneFile] as const;
