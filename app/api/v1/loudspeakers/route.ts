import { recordEvent } from "@/db/queries/audit";
import {
  createLoudspeaker as insertLoudspeaker,
  getLoudspeaker,
  listLoudspeakers as findLoudspeakers,
} from "@/db/queries/loudspeakers";
import { createLoudspeaker, listLoudspeakers } from "@/lib/api/loudspeakers";
import { handle } from "../../../_server/handle";
import { toLoudspeakerFields, toLoudspeakerView } from "../../../_server/views/loudspeaker-view";

export const GET = handle(listLoudspeakers, ({ query, inLab, caller }) =>
  inLab(async (trx) => {
    const rows = await findLoudspeakers(trx, caller.labId, query.search);
    return { loudspeakers: rows.map(toLoudspeakerView) };
  }),
);

export const POST = handle(createLoudspeaker, ({ body, inLab, caller, scope }) =>
  inLab(async (trx) => {
    const id = await insertLoudspeaker(
      trx,
      caller.labId,
      caller.accountId,
      toLoudspeakerFields(body),
    );
    await recordEvent(trx, scope, {
      act: "loudspeaker.created",
      subjectType: "loudspeaker",
      subjectId: id,
      details: { name: `${body.maker} ${body.model}` },
    });
    return toLoudspeakerView(await getLoudspeaker(trx, caller.labId, id));
  }),
);
