/** Series of the lab side by side: each as its list row shows it, with the causes decided so far. */
import type { Trx } from "../../../db/client";
import { findCurrentAnalysis } from "../../../db/queries/current-analysis";
import { listDecisions } from "../../../db/queries/decisions";
import { getLab } from "../../../db/queries/labs";
import { getLoudspeaker } from "../../../db/queries/loudspeakers";
import { getResult } from "../../../db/queries/results";
import { findSeries, toSeriesNumber } from "../../../db/queries/series";
import type { CompareAnswer } from "../../../lib/api/compare";
import { compareTests } from "../../../lib/compare/compare-tests";
import { fromSeries, type SeriesFacts } from "../../../lib/compare/compared-test";
import { COMPARED_KINDS, type Comparison } from "../../../lib/compare/comparison-schema";
import { AppError } from "../../../lib/errors/app-error";
import { listCriterionParts, readCriterion } from "../../../lib/result/criteria";

interface Asked {
  /** The first is the reference; one that is named twice counts once. */
  seriesIds: readonly string[];
  thd: string | null;
  compression: string | null;
  kind: Comparison["kind"];
}

/** @throws AppError "not-found" where none of the series is there; one that is missing is left out. */
export async function loadComparison(
  trx: Trx,
  labId: string,
  { seriesIds, thd, compression, kind }: Asked,
): Promise<CompareAnswer> {
  const lab = (await getLab(trx, labId)).name;
  const asked: SeriesFacts[] = [];
  const missing: string[] = [];
  for (const id of new Set(seriesIds.map((one) => one.toLowerCase()))) {
    const facts = await findFacts(trx, labId, lab, id);
    if (facts === null) missing.push(id);
    else asked.push(facts);
  }
  if (asked.length === 0) throw new AppError("not-found", "There is no such series.");
  const results = asked.flatMap((one) => one.result ?? []);
  const parts = listCriterionParts(results.flatMap((result) => result.settings.criteria));
  const criterion = readCriterion(parts, { thd, compression });
  const comparison = compareTests(
    asked.map((facts) => fromSeries(facts, { criterion, kind })),
    { criterion, kind },
  );
  return {
    ...comparison,
    left_out: [
      ...comparison.left_out,
      ...missing.map((id) => ({ id, maker: "", model: "A series", why: "It is no longer there." })),
    ],
    offered: {
      thd_percents: parts.thdPercents,
      compressions_dB: parts.compressionDbs,
      runs: COMPARED_KINDS.filter((one) =>
        results.some((result) => result.runs.some((run) => run.kind === one)),
      ),
    },
    asked: asked.map(({ id, loudspeaker: { maker, model } }) => ({ id, maker, model })),
  };
}

async function findFacts(
  trx: Trx,
  labId: string,
  lab: string,
  seriesId: string,
): Promise<SeriesFacts | null> {
  const series = await findSeries(trx, labId, seriesId);
  if (series === null) return null;
  const { maker, model, kind } = await getLoudspeaker(trx, labId, series.loudspeaker_id);
  // What the list shows: of a signed series the signed version, else the newest that is done.
  const analysisId =
    series.list_summary?.analysis_id ??
    (await findCurrentAnalysis(trx, labId, seriesId, "done"))?.id ??
    null;
  const decisions = analysisId === null ? [] : await listDecisions(trx, labId, analysisId);
  return {
    id: series.id,
    number: toSeriesNumber(series.number),
    lab,
    loudspeaker: { maker, model, kind },
    result: analysisId === null ? null : await getResult(trx, labId, analysisId),
    causes: new Map(
      decisions.flatMap((one) => (one.cause === null ? [] : [[one.nominal_Hz, one.cause]])),
    ),
  };
}
