import { keepRecording } from "@/db/queries/recordings";
import { recordEvent } from "@/db/queries/audit";
import { toMicrophoneResponse } from "@/lib/analysis/microphone";
import { LARGEST_MICROPHONE_FILE_BYTES, sendMicrophoneFile } from "@/lib/api/microphones";
import { readTable } from "@/lib/audio/read-table";
import { AppError } from "@/lib/errors/app-error";
import { handle } from "../../../_server/handle";
import { readBody } from "../../../_server/read-body";
import { storeBytes } from "../../../_server/store-bytes";

const ANY_HZ = 1000;

export const POST = handle(sendMicrophoneFile, async ({ query, request, inLab, caller, scope }) => {
  const { file_name: fileName } = query;
  const bytes = await readBody(request, LARGEST_MICROPHONE_FILE_BYTES);
  const { frequencyHz, levelDb } = readMicrophone(bytes, fileName);
  return storeBytes(bytes, (digest) =>
    inLab(async (trx) => {
      await keepRecording(trx, caller.labId, { digest, bytes: bytes.length, media: "text/plain" });
      await recordEvent(trx, scope, {
        act: "microphone.sent",
        subjectType: "microphone",
        subjectId: digest,
        details: { file_name: fileName, bytes: bytes.length },
      });
      return {
        file_name: fileName,
        digest,
        points: frequencyHz.length,
        from_Hz: frequencyHz[0] ?? 0,
        to_Hz: frequencyHz.at(-1) ?? 0,
        highest_dB: Math.max(...levelDb),
        lowest_dB: Math.min(...levelDb),
      };
    }),
  );
});

/** Read as the engine will read it, so that an analysis never fails for it. */
function readMicrophone(bytes: Uint8Array, file: string) {
  try {
    const table = readTable(bytes, file);
    toMicrophoneResponse({ ...table, file, kind: "response" }, ANY_HZ);
    return table;
  } catch (error) {
    if (!(error instanceof AppError) || error.code === "microphone.not-readable") throw error;
    throw new AppError(
      "microphone.not-readable",
      `${error.message} A microphone file holds one frequency in Hz and one level in dB a line.`,
      { file, cause: error },
    );
  }
}
