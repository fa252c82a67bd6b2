import { handle } from "@/app/_server/handle";
import { toPreviewView } from "@/app/_server/views/publication-view";
import { revokePreview as revoke } from "@/db/acts/previews";
import { getPreview } from "@/db/queries/previews";
import { revokePreview } from "@/lib/api/publications";

export const POST = handle(revokePreview, ({ params, inLab, scope }) =>
  inLab(async (trx) => {
    await revoke(trx, scope, params.previewId);
    return toPreviewView(await getPreview(trx, scope.labId, params.previewId));
  }),
);
