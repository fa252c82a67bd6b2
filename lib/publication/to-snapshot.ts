/**
 * The snapshot of a signed analysis. Figures are taken over as the analysis gave them; a person's
 * part is the cause of each band, as signed, and the words around the figures.
 */
import type { z } from "zod";
import type { publicationInputSchema } from "../api/publications";
import { AppError } from "../errors/app-error";
import { chooseLimit, findUsableTopHz } from "../result/choose-limit";
import type { Band, Result } from "../result/result-schema";
import type { SignedDecision } from "../review/review-schema";
import type { Plan } from "../series/plan-schema";
import type { Criterion } from "../series/series-schema";
import { ENVIRONMENTS } from "../series/vocabulary";
import type { Snapshot } from "./snapshot-schema";

export type PublicationWords = z.output<typeof publicationInputSchema>;

export interface SnapshotFacts {
  lab: Snapshot["lab"];
  series: Snapshot["series"];
  loudspeaker: Snapshot["loudspeaker"];
  plan: Pick<Plan, "state" | "place" | "calibration" | "sweep">;
  firstRecordingAt: Date;
  analysis: { version: number; engineVersion: string };
  result: Result;
  signOff: {
    criterion: Criterion;
    decisions: readonly SignedDecision[];
    decisionsDigest: string;
    resultDigest: string;
    onePerson: boolean;
    by: string;
    at: Date;
  };
  revision: number;
  publishedAt: Date;
  publishedBy: string;
  changeNote: string | null;
  words: PublicationWords;
}

/** @throws AppError "conflict.state" where the sign-off leaves a band without a decision */
export function toSnapshot(facts: SnapshotFacts): Snapshot {
  const { result, signOff, plan, words } = facts;
  const { criterion } = signOff;
  const decisions = new Map(signOff.decisions.map((one) => [one.nominal_Hz, one]));
  const usableTopHz = findUsableTopHz(result);
  const headline = result.headline.find((one) => isSame(one.criterion, criterion)) ?? null;
  return {
    format: "tidemark-publication-1",
    lab: facts.lab,
    series: facts.series,
    revision: facts.revision,
    published_at: facts.publishedAt.toISOString(),
    published_by: facts.publishedBy,
    change_note: facts.changeNote,
    loudspeaker: facts.loudspeaker,
    state: plan.state,
    supplied_by: words.supplied_by,
    measured: {
      environment: toEnvironment(result.environment),
      distance_m: result.distance_m,
      temperature_C: plan.place.temperature_C,
      first_recording_at: facts.firstRecordingAt.toISOString(),
      sweep: {
        start_Hz: plan.sweep.start_Hz,
        stop_Hz: plan.sweep.stop_Hz,
        length_s: plan.sweep.length_s,
      },
      levels_dB: listLevels(result, "short-term"),
      long_term_levels_dB: listLevels(result, "long-term"),
      calibration: toCalibrationWords(plan.calibration),
    },
    analysis: {
      version: facts.analysis.version,
      engine_version: facts.analysis.engineVersion,
      result_digest: signOff.resultDigest,
    },
    criterion,
    sign_off: {
      by: signOff.by,
      at: signOff.at.toISOString(),
      decisions_digest: signOff.decisionsDigest,
      one_person: signOff.onePerson,
    },
    spl_valid: result.spl_valid,
    bands: result.bands.map((band) =>
      toBand(band, decisions.get(band.nominal_Hz), chooseLimit(band, criterion, { usableTopHz })),
    ),
    headline,
    headline_missing: headline === null ? toMissingWords(result, criterion) : null,
    programme: result.programme.filter((one) => isSame(one.criterion, criterion)),
    uncertainty_dB: findLargestUncertainty(result.bands),
    words: words.words,
    maker_statement: words.maker_statement,
    answer_to_maker: words.answer_to_maker,
    evidence_public: words.evidence_public,
  };
}

function toBand(
  band: Band,
  decision: SignedDecision | undefined,
  limit: Snapshot["bands"][number]["limit"],
): Snapshot["bands"][number] {
  if (decision === undefined) {
    throw new AppError(
      "conflict.state",
      `The sign-off holds no decision for the band at ${band.nominal_Hz} Hz. Reopen the series, decide it and sign off again.`,
      { details: { nominal_Hz: band.nominal_Hz } },
    );
  }
  const changed = decision.cause !== decision.computed_cause;
  return {
    nominal_Hz: band.nominal_Hz,
    exact_Hz: band.exact_Hz,
    limit,
    onset: band.onset,
    cause: decision.cause,
    cause_changed: changed,
    cause_reason: changed ? (decision.reason ?? "") : band.cause_reason,
    levels: band.levels
      .filter((level) => level.variant === undefined)
      .map((level) => ({
        level_dB: level.level_dB,
        kind: level.kind,
        spl_dB: level.spl_dB,
        expected_dB: level.expected_dB,
        compression_dB: level.compression_dB,
        uncertainty_dB: level.uncertainty_dB,
        thd_percent: level.thd_percent,
        thd_quality: level.thd_quality,
        thd_orders: level.thd_orders,
      })),
    long_term: band.long_term,
    spl_uncertainty_dB: band.spl_uncertainty?.expanded_dB ?? null,
  };
}

const isSame = (a: Criterion, b: Criterion): boolean =>
  a.thd_percent === b.thd_percent && a.compression_dB === b.compression_dB;

function listLevels(result: Result, kind: "short-term" | "long-term"): number[] {
  const levels = result.runs
    .filter((run) => run.kind === kind && run.variant === undefined)
    .map((run) => run.level_dB);
  return [...new Set(levels)].sort((a, b) => a - b);
}

function findLargestUncertainty(bands: readonly Band[]): number | null {
  const all = bands.flatMap((band) => band.levels.flatMap((level) => level.uncertainty_dB ?? []));
  return all.length === 0 ? null : Math.max(...all);
}

function toMissingWords(result: Result, criterion: Criterion): string {
  if (!result.spl_valid) return "Absolute levels do not hold in this kind of space.";
  const asked = result.settings.criteria.some((one) => isSame(one, criterion));
  return asked
    ? "No range of two octaves or more stays within 3 dB of the usual limit, so no single figure says how loud it plays."
    : "The analysis gave no headline for this criterion.";
}

function toCalibrationWords(calibration: Plan["calibration"]): string {
  const at = `${calibration.level_dB} dB at ${calibration.frequency_Hz} Hz`;
  if (calibration.by === "calibrator") return `calibrator, ${at}, before`;
  if (calibration.by === "calibrator-before-after") return `calibrator, ${at}, before and after`;
  return `known sensitivity: full scale is ${calibration.full_scale_dB ?? "?"} dB SPL`;
}

function toEnvironment(name: string): (typeof ENVIRONMENTS)[number] {
  const known = ENVIRONMENTS.find((one) => one === name);
  if (known === undefined) {
    throw new AppError("conflict.state", `The analysis names an unknown environment "${name}".`);
  }
  return known;
}
