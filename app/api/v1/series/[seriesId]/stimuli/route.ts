import { makeZip } from "client-zip";
import { getStimulusZip } from "@/lib/api/series";
import { toDisposition } from "@/lib/http/disposition";
import type { StimulusFile } from "@/lib/series/stimulus-files";
import { handle } from "../../../../../_server/handle";
import { loadStimuli, toWebStream } from "../../../../../_server/stimulus";

export const GET = handle(getStimulusZip, async ({ params, inLab, caller }) => {
  const stimuli = await inLab((trx) => loadStimuli(trx, caller.labId, params.seriesId));
  const { checkList } = stimuli;
  const text = new TextEncoder().encode(checkList.text);
  const files = new Set(stimuli.bySlot.values());
  return new Response(makeZip(toEntries(files, { name: checkList.name, text })), {
    headers: {
      "content-type": "application/zip",
      "cache-control": "no-store, no-transform",
      "content-disposition": toDisposition(`${stimuli.fileStem}_stimuli.zip`),
    },
  });
});

/** Each file is made when its turn comes. */
function* toEntries(
  files: Iterable<StimulusFile>,
  checkList: { name: string; text: Uint8Array<ArrayBuffer> },
) {
  yield { name: checkList.name, input: checkList.text, size: checkList.text.length };
  for (const { name, bytes, read } of files) {
    yield { name, input: toWebStream(read()), size: bytes };
  }
}
