import { recordEvent } from "@/db/queries/audit";
import { getLoudspeaker, updateLoudspeaker } from "@/db/queries/loudspeakers";
import { findRecording, keepRecording } from "@/db/queries/recordings";
import { getLoudspeakerPhoto, putLoudspeakerPhoto } from "@/lib/api/loudspeakers";
import { AppError } from "@/lib/errors/app-error";
import { MAX_PHOTO_BYTES, toPictureType } from "@/lib/storage/picture-type";
import { handle } from "../../../../../_server/handle";
import { readBody } from "../../../../../_server/read-body";
import { getStore } from "../../../../../_server/storage";
import { storeBytes } from "../../../../../_server/store-bytes";
import { toLoudspeakerView } from "../../../../../_server/views/loudspeaker-view";

export const PUT = handle(
  putLoudspeakerPhoto,
  async ({ params, request, inLab, caller, scope }) => {
    const { loudspeakerId } = params;
    await inLab((trx) => getLoudspeaker(trx, caller.labId, loudspeakerId));
    const bytes = await readBody(request, MAX_PHOTO_BYTES);
    const media = toPictureType(bytes);
    return storeBytes(bytes, (digest) =>
      inLab(async (trx) => {
        await keepRecording(trx, caller.labId, { digest, bytes: bytes.length, media });
        await updateLoudspeaker(trx, caller.labId, loudspeakerId, { photo_digest: digest });
        await recordEvent(trx, scope, {
          act: "loudspeaker.photo-set",
          subjectType: "loudspeaker",
          subjectId: loudspeakerId,
          details: { digest, bytes: bytes.length },
        });
        return toLoudspeakerView(await getLoudspeaker(trx, caller.labId, loudspeakerId));
      }),
    );
  },
);

export const GET = handle(getLoudspeakerPhoto, async ({ params, inLab, caller }) => {
  const found = await inLab(async (trx) => {
    const { photo_digest: digest } = await getLoudspeaker(trx, caller.labId, params.loudspeakerId);
    const file = digest === null ? null : await findRecording(trx, caller.labId, digest);
    return file;
  });
  if (found === null) throw new AppError("not-found", "This loudspeaker has no photo.");
  return new Response(await getStore().stream(found.digest), {
    headers: {
      "content-type": found.media,
      "content-security-policy": "default-src 'none'",
      "cache-control": "private, max-age=300",
    },
  });
});
