import { getStimulus } from "@/lib/api/series";
import { handle } from "../../../../../../_server/handle";
import { answerStimulus, getStimulusFile, loadStimuli } from "../../../../../../_server/stimulus";

export const GET = handle(getStimulus, async ({ params, inLab, caller }) => {
  const stimuli = await inLab((trx) => loadStimuli(trx, caller.labId, params.seriesId));
  return answerStimulus(getStimulusFile(stimuli, params.slot));
});
