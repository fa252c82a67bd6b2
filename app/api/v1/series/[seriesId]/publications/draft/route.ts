import { handle } from "@/app/_server/handle";
import { draftSnapshot } from "@/db/acts/publish";
import { draftPublication } from "@/lib/api/publications";

export const POST = handle(draftPublication, ({ params, body, inLab, scope }) =>
  inLab(async (trx) => {
    const { snapshot } = await draftSnapshot(trx, scope, params.seriesId, {
      words: {
        words: body.words ?? "",
        supplied_by: body.supplied_by ?? "not stated",
        maker_statement: body.maker_statement ?? null,
        answer_to_maker: body.answer_to_maker ?? null,
        evidence_public: body.evidence_public ?? false,
      },
      slug: null,
      changeNote: null,
      at: new Date(),
    });
    return snapshot;
  }),
);
