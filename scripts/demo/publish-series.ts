/** A demo series from review to its readers, by the steps of an analyst and of a reviewer. */
import { decideBands } from "../../db/acts/decide-bands";
import { publishSeries } from "../../db/acts/publish";
import { loadReviewFacts, signOffAnalysis } from "../../db/acts/sign-off";
import type { Db } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { getAnalysis } from "../../db/queries/analyses";
import { findCurrentAnalysis } from "../../db/queries/current-analysis";
import { listDecisions } from "../../db/queries/decisions";
import { listPublications } from "../../db/queries/publications";
import { getResult } from "../../db/queries/results";
import { getSeries } from "../../db/queries/series";
import { listComputedCauses } from "../../lib/review/computed-cause";
import type { Published } from "./demo-labs";
import type { SeededLab } from "./seed-people";

const CRITERION = { thd_percent: 10, compression_dB: 3 };

/**
 * Confirms what the analysis found in every band that is open, signs off and publishes; what is
 * done already is left alone. A series that is not analysed stays as it is.
 *
 * @returns whether it is published now
 * @throws AppError where an act is refused
 */
export async function publishDemoSeries(
  app: Db,
  { labId, analystId, reviewerId }: SeededLab,
  seriesId: string,
  published: Published,
): Promise<boolean> {
  const analyst = { labId, accountId: analystId };
  const reviewer = { labId, accountId: reviewerId };
  const state = await inLab(app, analyst, async (trx) => {
    const series = await getSeries(trx, labId, seriesId);
    const analysis = await findCurrentAnalysis(trx, labId, seriesId, "done");
    if (series.state !== "in review" || analysis === null) return series.state;
    const { bands } = await getResult(trx, labId, analysis.id);
    const decided = new Set(
      (await listDecisions(trx, labId, analysis.id)).map((one) => one.nominal_Hz),
    );
    await decideBands(
      trx,
      analyst,
      analysis.id,
      bands
        .filter((band) => !decided.has(band.nominal_Hz))
        .map((band) => ({
          nominal_Hz: band.nominal_Hz,
          cause: listComputedCauses(band)[0] ?? band.cause,
          reason: null,
          seen_version: 0,
        })),
    );
    const facts = await loadReviewFacts(
      trx,
      analyst,
      series,
      await getAnalysis(trx, labId, analysis.id),
      { mayDecide: true, bandsHz: bands.map((band) => band.nominal_Hz) },
    );
    await signOffAnalysis(trx, analyst, analysis.id, {
      criterion: CRITERION,
      decisionsDigest: facts.decisionsDigest ?? "",
    });
    return "signed off";
  });
  if (state !== "signed off") return false;
  await inLab(app, reviewer, async (trx) => {
    if ((await listPublications(trx, labId, seriesId)).length > 0) return;
    await publishSeries(trx, reviewer, seriesId, {
      slug: null,
      embargoUntil: null,
      changeNote: null,
      words: {
        words: published.words,
        supplied_by: published.suppliedBy,
        maker_statement: published.makerStatement ?? null,
        answer_to_maker: null,
        evidence_public: true,
      },
    });
  });
  return true;
}
