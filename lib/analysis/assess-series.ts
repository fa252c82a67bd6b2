/** The back of the engine: from measured runs to findings. Pure; the same input gives the same numbers. */
import { getAt } from "./get-at";
import type { z } from "zod";
import type {
  Band,
  Limit,
  Warning,
  evidenceSchema,
  headlineSchema,
  onsetSchema,
  programmeSchema,
  shapeSchema,
} from "../result/result-schema";
import type { Criterion, Settings } from "../series/series-schema";
import { Plans } from "./cell-power";
import { listBandLevels, orNull, referRuns } from "./band-levels";
import { nameCauses, type BandCause } from "./cause";
import { groupRuns, groupShortTerm, type LevelGroup } from "./compression";
import { composeHeadline } from "./headline";
import { drawLaw } from "./law-curve";
import {
  findLimit,
  findLongTermLimit,
  linearSplGain,
  type BandLimit,
  type LimitInput,
} from "./limits";
import { findLongTermLosses } from "./long-term";
import { suggestNextRun } from "./next-run";
import { findOnsets } from "./onset/find-onsets";
import { ONSET_LOSS_DB } from "./onset/shapes";
import { readSteps } from "./onset/steps";
import { DEFAULT_CREST_DB, PROGRAMME_SPECTRA, estimateProgramme } from "./programme";
import { sayNumber } from "./say";
import { warnOfSeries } from "./series-warnings";
import { budgetSpl } from "./spl-uncertainty";
import { shapeOf } from "./shape";
import type { MeasuredSeries } from "./types";

/** Everything of a result that is found rather than measured; numbers are not rounded yet. */
export interface Assessment {
  bands: Band[];
  shape: z.infer<typeof shapeSchema>[];
  headline: z.infer<typeof headlineSchema>[];
  programme: z.infer<typeof programmeSchema>[];
  warnings: Warning[];
}

interface Assessed {
  input: LimitInput;
  cause: BandCause;
  /** Short-term limits, in the order of the criteria. */
  limits: BandLimit[];
}

/**
 * Assesses a measured series: compression, onset, cause and limits per band, headline and programme estimate.
 *
 * @param series at least one plain short-term run; not modified.
 * @param plans tables of earlier series, to be used again.
 * @returns null stands for "no value".
 * @throws AnalysisError "series.reference-missing"
 */
export function assessSeries(
  series: MeasuredSeries,
  settings: Pick<Settings, "criteria">,
  plans = new Plans(),
): Assessment {
  const groups = groupShortTerm(series);
  const longTerm = groupRuns(series, "long-term", undefined);
  const steps = readSteps(groups, groups[0], series.bands.length);
  const onsets = findOnsets(groups, steps, series.bands.length, (drives) => plans.onset(drives));
  const causes = nameCauses(series, groups, onsets);
  const budgets = budgetSpl(series, groups);
  const references = referRuns(series, groups, steps);
  const assessed = series.bands.map((band, index): Assessed => {
    const onset = getAt(onsets, index);
    const input: LimitInput = { band, index, topHz: series.topHz, groups, onset, longTerm };
    return {
      input,
      cause: getAt(causes, index),
      limits: settings.criteria.map((criterion) => findLimit(input, criterion)),
    };
  });
  const { headline, programme, warnings } = summarise(assessed, settings.criteria);
  return {
    bands: assessed.map((band): Band => {
      const { input, cause, limits } = band;
      const longLimits = settings.criteria.flatMap(
        (criterion) => findLongTermLimit(input, criterion) ?? [],
      );
      return {
        nominal_Hz: input.band.nominalHz,
        exact_Hz: input.band.exactHz,
        levels: listBandLevels(references, input.index),
        onset: toOnset(input, cause),
        cause: cause.cause,
        cause_inferred: cause.inferred,
        cause_reason: cause.reason,
        evidence: toEvidence(input, cause, series.splValid),
        long_term: findLongTermLosses(series, longTerm, groups, input.index).map((loss) => ({
          level_dB: loss.levelDb,
          total_dB: orNull(loss.totalDb),
          thermal_dB: orNull(loss.thermalDb),
          uncertainty_dB: orNull(loss.uncertaintyDb),
          lower_bound: loss.lowerBound,
          cause: loss.cause,
        })),
        limits: [...limits, ...longLimits].map(toLimit),
        spl_uncertainty: getAt(budgets, input.index),
      };
    }),
    shape: [...groups.slice(1), ...longTerm].map((group) => toShape(group, groups[0], series)),
    headline,
    programme,
    warnings: [...warnOfSeries(series, groups, steps, onsets), ...warnings],
  };
}

function toOnset(
  { onset, groups, index }: LimitInput,
  cause: BandCause,
): z.infer<typeof onsetSchema> {
  const { status, reason, posterior, detection } = onset;
  const top = groups[detection?.top ?? 0];
  const common = {
    ceiling_dB: cause.ceiling ? orNull(top?.splDb[index]) : null,
    ...(reason === "" ? {} : { reason }),
    ...(onset.noLaw === null ? {} : { control: onset.noLaw.control }),
  };
  const none = { nominal_dB: null, low_dB: null, high_dB: null, spl_dB: null };
  if (status === "below lowest") {
    const lowest = groups.find((group) => Number.isFinite(group.gainDb[index]));
    return { status, ...none, high_dB: orNull(lowest?.driveDb), ...common };
  }
  if (status !== "found" || !posterior) return { status, ...none, ...common };
  const { lowDb, medianDb, highDb } = posterior.quantiles(ONSET_LOSS_DB, top?.driveDb ?? Infinity);
  return {
    status,
    nominal_dB: orNull(medianDb),
    low_dB: orNull(lowDb),
    high_dB: orNull(highDb),
    spl_dB: orNull(linearSplGain(groups, onset, index) + medianDb - ONSET_LOSS_DB),
    ...common,
  };
}

function toEvidence(
  { onset, groups, index }: LimitInput,
  cause: BandCause,
  splValid: boolean,
): z.infer<typeof evidenceSchema> {
  const { posterior, detection, distortion, gains } = onset;
  const drives = groups
    .filter((_, k) => Number.isFinite(gains.gainDb[k]))
    .map(({ driveDb }) => driveDb);
  const gainDb = splValid ? linearSplGain(groups, onset, index) : 0;
  const law =
    detection && Number.isFinite(gainDb)
      ? drawLaw(posterior, gainDb, drives[0] ?? Number.NaN, drives.at(-1) ?? Number.NaN)
      : null;
  const next =
    posterior && onset.status === "found"
      ? suggestNextRun(
          posterior,
          drives,
          Math.hypot(detection?.lossSigmaDb[detection.top] ?? 0, gains.stepSigmaDb.at(-1) ?? 0),
        )
      : null;
  return {
    slope: orNull(cause.slope),
    odd_ratio: orNull(distortion?.oddRatio),
    growth_dB: orNull(distortion?.growthDb),
    growth_needed_dB: orNull(distortion?.growthNeededDb),
    law: detection ? (posterior?.law ?? "linear") : null,
    law_curve: law && { expected_dB: law.expectedDb, measured_dB: law.measuredDb },
    next_run: next && {
      level_dB: next.levelDb,
      width_now_dB: next.widthNowDb,
      width_expected_dB: next.widthExpectedDb,
      candidates: next.candidates.map(({ levelDb, widthExpectedDb }) => ({
        level_dB: levelDb,
        width_expected_dB: widthExpectedDb,
      })),
    },
  };
}

function toLimit(limit: BandLimit): Limit {
  return {
    criterion: limit.criterion,
    kind: limit.kind,
    status: limit.status,
    nominal_dB: orNull(limit.nominalDb),
    low_dB: orNull(limit.lowDb),
    high_dB: orNull(limit.highDb),
    spl_dB: orNull(limit.splDb),
    bound_by: limit.boundBy,
    reached: limit.reached,
    ...(limit.reason === undefined ? {} : { reason: limit.reason }),
  };
}

function toShape(
  group: LevelGroup,
  reference: LevelGroup,
  series: MeasuredSeries,
): z.infer<typeof shapeSchema> {
  const { broadbandDb, excessDb, excessHz } = shapeOf(group, reference, series.bands);
  return {
    file: group.runs[0]?.file ?? "",
    level_dB: group.levelDb,
    kind: group.runs[0]?.kind ?? "short-term",
    broadband_dB: orNull(broadbandDb),
    excess_dB: orNull(excessDb),
    excess_Hz: orNull(excessHz),
  };
}

function sayCriterion({ thd_percent: thd, compression_dB: loss }: Criterion): string {
  const halves = [
    thd === undefined ? [] : [`THD ${thd} %`],
    loss === undefined ? [] : [`compression ${sayNumber(loss, 1)} dB`],
  ];
  return halves.flat().join(" or ");
}

function summarise(
  assessed: readonly Assessed[],
  criteria: readonly Criterion[],
): Pick<Assessment, "headline" | "programme" | "warnings"> {
  const headline: Assessment["headline"] = [];
  const programme: Assessment["programme"] = [];
  const warnings: Warning[] = [];
  criteria.forEach((criterion, c) => {
    const bands = assessed.map(({ input, cause, limits }) => ({
      band: input.band,
      limit: getAt(limits, c),
      ceiling: cause.ceiling,
      splGainDb: linearSplGain(input.groups, input.onset, input.index),
    }));
    const composed = composeHeadline(criterion, bands);
    const found = "headline" in composed ? composed.headline : null;
    if (found) {
      const { first } = found;
      headline.push({
        criterion,
        from_Hz: found.fromHz,
        to_Hz: found.toHz,
        spl_dB: found.splDb,
        at_least: found.atLeast,
        first: first && {
          status: first.status,
          nominal_Hz: first.nominalHz,
          spl_dB: orNull(first.splDb),
          nominal_dB: orNull(first.nominalDb),
          ceiling: first.ceiling,
        },
      });
    } else if ("refused" in composed) {
      warnings.push({
        code: "headline.refused",
        message: `No headline for ${sayCriterion(criterion)}: ${composed.refused}.`,
      });
    }
    for (const spectrum of PROGRAMME_SPECTRA) {
      const estimate = estimateProgramme(
        spectrum,
        DEFAULT_CREST_DB,
        criterion,
        bands,
        found?.lowestDriveDb ?? null,
      );
      if (estimate.refused !== null && found) {
        warnings.push({
          code: "programme.refused",
          message: `No programme estimate (${spectrum}) for ${sayCriterion(criterion)}: ${estimate.refused}.`,
        });
      }
      programme.push({
        spectrum,
        crest_dB: estimate.crestDb,
        criterion,
        spl_dB: orNull(estimate.splDb),
        spl_dBA: orNull(estimate.splDba),
        bound_by: estimate.boundBy,
        first_band_Hz: orNull(estimate.firstBandHz),
        at_least: estimate.atLeast,
        from_Hz: orNull(estimate.fromHz),
        to_Hz: orNull(estimate.toHz),
      });
    }
  });
  return { headline, programme, warnings };
}
