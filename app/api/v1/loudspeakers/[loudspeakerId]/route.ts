import { recordEvent } from "@/db/queries/audit";
import {
  getLoudspeaker as getRow,
  updateLoudspeaker as changeRow,
} from "@/db/queries/loudspeakers";
import { getLoudspeaker, updateLoudspeaker } from "@/lib/api/loudspeakers";
import { handle } from "../../../../_server/handle";
import { toLoudspeakerChange, toLoudspeakerView } from "../../../../_server/views/loudspeaker-view";

export const GET = handle(getLoudspeaker, ({ params, inLab, caller }) =>
  inLab(async (trx) => toLoudspeakerView(await getRow(trx, caller.labId, params.loudspeakerId))),
);

export const PATCH = handle(updateLoudspeaker, ({ params, body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const { loudspeakerId } = params;
    await changeRow(trx, caller.labId, loudspeakerId, toLoudspeakerChange(body));
    await recordEvent(trx, scope, {
      act: "loudspeaker.changed",
      subjectType: "loudspeaker",
      subjectId: loudspeakerId,
      details: { ...body },
    });
    return toLoudspeakerView(await getRow(trx, caller.labId, loudspeakerId));
  }),
);
