/** A test in the shape in which it is compared, from the lab's own result or from a publication. */
import { composeHeadline } from "../analysis/headline";
import { computedCause } from "../charts/band-columns";
import type { Snapshot } from "../publication/snapshot-schema";
import { chooseLimit, findUsableTopHz } from "../result/choose-limit";
import { sayCriterion } from "../result/criteria";
import type { Limit, Result } from "../result/result-schema";
import { toLimitWords } from "../reader/page-words";
import type { DecisionCause } from "../review/review-schema";
import type { Criterion } from "../series/series-schema";
import { ENVIRONMENTS, type Environment } from "../series/vocabulary";
import { SIDE_BY_SIDE, type Candidate } from "./compare-tests";
import type { ComparedBand, ComparedTest, Comparison } from "./comparison-schema";
import { ASSUMED_UNCERTAINTY_DB } from "./difference";
import { PLACE_WORDS } from "./space";

type Judged = Pick<Comparison, "criterion" | "kind">;

export interface SeriesFacts {
  id: string;
  number: string;
  lab: string;
  loudspeaker: { maker: string; model: string; kind: string };
  /** null while there is none. */
  result: Result | null;
  /** By nominal frequency: what a person decided. */
  causes: ReadonlyMap<number, DecisionCause>;
}

/** @returns the series under the criterion and kind of run, or why it cannot be compared. */
export function fromSeries(facts: SeriesFacts, { criterion, kind }: Judged): Candidate {
  const { id, loudspeaker, result } = facts;
  const unfit = (why: string): Candidate => ({
    id,
    maker: loudspeaker.maker,
    model: loudspeaker.model,
    unfit: why,
  });
  if (result === null) return unfit("It has no analysis yet.");
  const environment = toEnvironment(result.environment);
  if (environment === null || !result.spl_valid) return unfit(toNoLevels(environment));
  if (!holds(result, criterion)) {
    return unfit(
      `Its analysis did not judge by ${sayCriterion(criterion)}. Add the criterion and analyse it again.`,
    );
  }
  const runs = result.runs.filter((run) => run.kind === kind && run.variant === undefined);
  if (runs.length === 0) return unfit(`It has no ${kind} runs.`);
  const usableTopHz = findUsableTopHz(result);
  const bands = result.bands.map((band) => {
    const limit = chooseLimit(band, criterion, { kind, usableTopHz });
    return toComparedBand(
      band,
      limit,
      facts.causes.get(band.nominal_Hz) ?? computedCause(band, limit),
      band.spl_uncertainty?.expanded_dB,
    );
  });
  const headline =
    kind === "short-term" ? result.headline.find((one) => isSame(one.criterion, criterion)) : null;
  return {
    test: {
      id,
      path: `/series/${id}/output-limit`,
      maker: loudspeaker.maker,
      model: loudspeaker.model,
      lab: facts.lab,
      number: facts.number,
      stage: loudspeaker.kind.includes("stage"),
      environment,
      distance_m: result.distance_m,
      levels_dB: toLevels(runs),
      uncertainty_assumed: result.bands.some((band) => band.spl_uncertainty == null),
      bands,
      ...(headline == null ? composeReached(bands, criterion) : toReached(headline)),
    },
  };
}

/** @returns the publication, or why it cannot stand under this criterion. */
export function fromSnapshot(
  snapshot: Snapshot,
  { id, path }: { id: string; path: string },
  criterion: Criterion,
): Candidate {
  const { loudspeaker, measured } = snapshot;
  const unfit = (why: string): Candidate => ({
    id,
    maker: loudspeaker.maker,
    model: loudspeaker.model,
    unfit: why,
  });
  if (!snapshot.spl_valid) return unfit(toNoLevels(measured.environment));
  if (!isSame(snapshot.criterion, criterion)) {
    return unfit(
      `Its limit is ${toLimitWords(snapshot.criterion)}; here the limit is ${toLimitWords(criterion)}. ${SIDE_BY_SIDE}`,
    );
  }
  return {
    test: {
      id,
      path,
      maker: loudspeaker.maker,
      model: loudspeaker.model,
      lab: snapshot.lab.name,
      number: snapshot.series.number,
      stage: loudspeaker.kind.includes("stage"),
      environment: measured.environment,
      distance_m: measured.distance_m,
      levels_dB: [...measured.levels_dB].sort((a, b) => a - b),
      uncertainty_assumed: snapshot.bands.some((band) => band.spl_uncertainty_dB == null),
      bands: snapshot.bands.map((band) =>
        toComparedBand(band, band.limit, band.cause, band.spl_uncertainty_dB),
      ),
      ...(snapshot.headline === null
        ? { reached: null, reached_missing: snapshot.headline_missing }
        : toReached(snapshot.headline)),
    },
  };
}

const toComparedBand = (
  band: Pick<ComparedBand, "nominal_Hz" | "exact_Hz">,
  limit: Limit,
  cause: DecisionCause,
  uncertaintyDb: number | null | undefined,
): ComparedBand => ({
  nominal_Hz: band.nominal_Hz,
  exact_Hz: band.exact_Hz,
  status: limit.status,
  spl_dB: limit.spl_dB,
  nominal_dB: limit.nominal_dB,
  low_dB: limit.low_dB,
  high_dB: limit.high_dB,
  bound_by: limit.bound_by,
  cause,
  uncertainty_dB: uncertaintyDb ?? ASSUMED_UNCERTAINTY_DB,
});

type Reached = Pick<ComparedTest, "reached" | "reached_missing">;

const toReached = ({ from_Hz, to_Hz, spl_dB, at_least }: Result["headline"][number]): Reached => ({
  reached: { from_Hz, to_Hz, spl_dB, at_least },
  reached_missing: null,
});

/** For a pair that the analysis holds as its halves, and for long-term runs. */
function composeReached(bands: readonly ComparedBand[], criterion: Criterion): Reached {
  const composed = composeHeadline(
    criterion,
    bands.map((band) => ({
      band: { nominalHz: band.nominal_Hz },
      limit: {
        status: band.status,
        splDb: band.spl_dB ?? Number.NaN,
        nominalDb: band.nominal_dB ?? Number.NaN,
      },
      ceiling: false,
    })),
  );
  if (!("headline" in composed)) return { reached: null, reached_missing: composed.refused };
  const { fromHz, toHz, splDb, atLeast } = composed.headline;
  return {
    reached: { from_Hz: fromHz, to_Hz: toHz, spl_dB: splDb, at_least: atLeast },
    reached_missing: null,
  };
}

const toLevels = (runs: readonly { level_dB: number }[]): number[] =>
  [...new Set(runs.map((run) => run.level_dB))].sort((a, b) => a - b);

const toNoLevels = (environment: Environment | null): string =>
  `Levels in dB SPL do not hold where it was measured${environment === null ? "" : ` (${PLACE_WORDS[environment]})`}, so its limits cannot be compared.`;

const toEnvironment = (name: string): Environment | null =>
  ENVIRONMENTS.find((one) => one === name) ?? null;

/** Computed as such, or both halves of it, each alone. */
function holds({ settings }: Pick<Result, "settings">, criterion: Criterion): boolean {
  const judgedBy = (one: Criterion): boolean =>
    settings.criteria.some((judged) => isSame(judged, one));
  const { thd_percent, compression_dB } = criterion;
  return (
    judgedBy(criterion) ||
    (thd_percent !== undefined &&
      compression_dB !== undefined &&
      judgedBy({ thd_percent }) &&
      judgedBy({ compression_dB }))
  );
}

const isSame = (a: Criterion, b: Criterion): boolean =>
  a.thd_percent === b.thd_percent && a.compression_dB === b.compression_dB;
