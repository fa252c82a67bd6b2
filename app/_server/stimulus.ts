/** Answers with files that are made while they are sent. */
import { loadCapture } from "../../db/acts/capture";
import { toSeriesNumber } from "../../db/queries/series";
import type { Trx } from "../../db/client";
import { AppError } from "../../lib/errors/app-error";
import { toDisposition } from "../../lib/http/disposition";
import { toFileStem } from "../../lib/series/planned-runs";
import {
  toCheckListText,
  toConditioningFiles,
  toStimulusFile,
  type StimulusFile,
} from "../../lib/series/stimulus-files";

export interface SeriesStimuli {
  fileStem: string;
  bySlot: Map<string, StimulusFile>;
  checkList: { name: string; text: string };
}

/** @throws AppError "not-found" */
export async function loadStimuli(
  trx: Trx,
  labId: string,
  seriesId: string,
): Promise<SeriesStimuli> {
  const { series, loudspeaker, planned } = await loadCapture(trx, labId, seriesId);
  const fileStem = toFileStem(loudspeaker.model);
  const bySlot = new Map<string, StimulusFile>();
  for (const run of planned) {
    const file = toStimulusFile(series.plan, run);
    if (file !== null) bySlot.set(run.slot, file);
  }
  for (const [slot, file] of toConditioningFiles(series.plan, planned, fileStem)) {
    bySlot.set(slot, file);
  }
  const title = `${loudspeaker.maker} ${loudspeaker.model}, series ${toSeriesNumber(series.number)}: capture check-list`;
  return {
    fileStem,
    bySlot,
    checkList: {
      name: `${fileStem}_check-list.txt`,
      text: toCheckListText(series.plan, title),
    },
  };
}

/** @throws AppError "not-found" where nothing of ours is played for the slot */
export function getStimulusFile({ bySlot }: SeriesStimuli, slot: string): StimulusFile {
  const file = bySlot.get(slot);
  if (file === undefined) {
    throw new AppError("not-found", `The plan has no stimulus file for ${slot}.`);
  }
  return file;
}

export function answerStimulus(file: StimulusFile): Response {
  return new Response(toWebStream(file.read()), {
    headers: {
      "content-type": "audio/wav",
      // Sound does not shrink: nothing on the way need try.
      "cache-control": "no-store, no-transform",
      "content-disposition": toDisposition(file.name),
    },
  });
}

/** One piece at a time, when it is asked for; other requests come in between. */
export function toWebStream(pieces: Iterable<Uint8Array<ArrayBuffer>>): ReadableStream<Uint8Array> {
  const iterator = pieces[Symbol.iterator]();
  return new ReadableStream<Uint8Array>({
    async pull(controller) {
      await new Promise((resolve) => setImmediate(resolve));
      const next = iterator.next();
      if (next.done === true) controller.close();
      else controller.enqueue(next.value);
    },
    cancel() {
      iterator.return?.();
    },
  });
}
