/** The onset of every band of a series: detection first, then the posterior over the laws. */
import type { LevelGroup } from "../compression";
import { sayDb, sayRun } from "../say";
import type { OnsetStatus } from "../../series/vocabulary";
import {
  weighDistortion,
  type DistortionEvidence,
  type OverloadVerdict,
} from "../distortion-evidence";
import { detectLoss, type Detection } from "./detect";
import { isEdgeOfWay } from "./edge-of-way";
import { computeLikelihood, type BandGains, type OnsetLikelihood } from "./likelihood";
import { planOnset, type OnsetPlan } from "./onset-plan";
import { readNoLaw, type NoLaw } from "./no-law";
import { computePosterior, type OnsetPosterior } from "./posterior";
import { ONSET_LOSS_DB } from "./shapes";
import { priorOf, poolShapes } from "./shape-prior";
import type { StepReading } from "./steps";

/** A loss is reported from this many standard uncertainties: about one false alarm in 300 000 bands. */
const REPORTED_SIGMAS = 4.5;
/** A band whose top loss is known no better than this cannot show 1/3 dB, dB. */
const BLIND_SIGMA_DB = ONSET_LOSS_DB / 3;
/** chi^2 above this, and two more per level, is no static law. */
const NO_LAW_CHI_SQUARE = 14;

export interface BandOnset {
  status: OnsetStatus;
  reason: string;
  gains: BandGains;
  detection: Detection | null;
  distortion: DistortionEvidence | null;
  /** The verdict that the fit used, and whether a neighbour gave it. */
  overload: OverloadVerdict;
  overloadInferred: boolean;
  /** Present where the top run is active and a law fits. */
  posterior: OnsetPosterior | null;
  /** What it means that no law follows the losses; null where one does. */
  noLaw: NoLaw | null;
}

/**
 * @param groups plain short-term levels, ascending; the first is the reference.
 * @param steps readings of the same groups.
 * @param toPlan gives the tables of the groups' drives; one plan serves any number of series.
 * @returns [bands]
 */
export function findOnsets(
  groups: readonly LevelGroup[],
  steps: readonly StepReading[],
  bands: number,
  toPlan: (drivesDb: readonly number[]) => OnsetPlan = planOnset,
): BandOnset[] {
  const drafts = Array.from({ length: bands }, (_, b) => draftBand(groups, steps, b));
  inferOverload(drafts);
  const fitted = drafts.filter(
    ({ detection }) => detection !== null && detection.firstActive <= detection.top,
  );
  if (groups.length < 2 || fitted.length === 0)
    return drafts.map((draft) => conclude(draft, groups, false));
  const tables = toPlan(groups.map(({ driveDb }) => driveDb));
  const likelihoods = drafts.map((draft) =>
    fitted.includes(draft) ? likelihoodOf(tables, draft) : null,
  );
  const detections = drafts.map(({ detection }) => detection);
  const pooled = poolShapes(
    tables,
    likelihoods.map((likelihood, b) => (drafts[b]?.overload === "no overload" ? likelihood : null)),
  );
  drafts.forEach((draft, b) => {
    const likelihood = likelihoods[b];
    if (!likelihood) return;
    const others = pooled[b] ?? null;
    const posterior = computePosterior(likelihood, priorOf(tables, draft.overload, others));
    const kept =
      others !== null && isEdgeOfWay(detections, b)
        ? widenTo(posterior, computePosterior(likelihood, priorOf(tables, draft.overload, null)))
        : posterior;
    draft.posterior = coverCeiling(kept, tables, draft);
    draft.detection = draft.detection && countFromFit(draft.detection, draft.posterior);
  });
  return drafts.map((draft, b) => conclude(draft, groups, isEdgeOfWay(detections, b)));
}

/**
 * At the edge of a way the bands share no law: what the others say of it may lead, but takes nothing off what the
 * band's own runs leave open.
 */
function widenTo(posterior: OnsetPosterior, own: OnsetPosterior): OnsetPosterior {
  return {
    ...posterior,
    quantiles: (lossDb, ceilingDb) => {
      const led = posterior.quantiles(lossDb, ceilingDb);
      const alone = own.quantiles(lossDb, ceilingDb);
      return {
        lowDb: Math.min(led.lowDb, alone.lowDb),
        medianDb: led.medianDb,
        highDb: Math.max(led.highDb, alone.highDb),
      };
    },
  };
}

/**
 * One run that loses shows neither slope nor knee: what the laws expect of them would rule out the
 * commonest device of all, a ceiling with a hard knee, by the width of the prior alone. There the
 * interval reaches up to the one bound that needs no law: the output never falls.
 */
function coverCeiling(
  posterior: OnsetPosterior,
  { drivesDb }: OnsetPlan,
  { detection, overload }: BandOnset,
): OnsetPosterior {
  if (detection?.firstActive !== detection?.top || overload === "overload") return posterior;
  const top = detection?.top ?? 0;
  const lossAtTopDb = detection?.lossDb[top] ?? Number.NaN;
  const sigmaDb = detection?.lossSigmaDb[top] ?? Number.NaN;
  return {
    ...posterior,
    quantiles: (lossDb, ceilingDb) => {
      const fitted = posterior.quantiles(lossDb, ceilingDb);
      const boundDb = (drivesDb[top] ?? Number.NaN) - (lossAtTopDb - lossDb) + sigmaDb;
      if (!(lossDb <= lossAtTopDb) || !(boundDb > fitted.highDb)) return fitted;
      return { ...fitted, highDb: Math.min(boundDb, ceilingDb) };
    },
  };
}

/**
 * Losses counted from the gain that the laws give. A foot below the first active run lowers the mean of the runs
 * that agree; where not even the second run is free, the fit's gain is an extrapolation and is not taken.
 */
function countFromFit(detection: Detection, { gainDb }: OnsetPosterior): Detection {
  if (detection.firstActive < 2) return detection;
  const liftDb = gainDb - detection.gainDb;
  return { ...detection, gainDb, lossDb: detection.lossDb.map((lossDb) => lossDb + liftDb) };
}

function draftBand(
  groups: readonly LevelGroup[],
  steps: readonly StepReading[],
  b: number,
): BandOnset {
  const gains: BandGains = {
    gainDb: Float64Array.from(
      groups,
      (group, k) => (group.gainDb[b] ?? Number.NaN) + (steps[k]?.takenDb ?? 0),
    ),
    sigmaDb: Float64Array.from(groups, (group) => group.sigmaDb[b] ?? Number.NaN),
    stepSigmaDb: Float64Array.from(steps, ({ sigmaDb }) => sigmaDb),
  };
  const detection = detectLoss(gains);
  const distortion = detection && weighDistortion(groups, detection, b);
  return {
    status: "unresolved",
    reason: "",
    gains,
    detection,
    distortion,
    overload: distortion?.verdict ?? "no verdict",
    overloadInferred: false,
    posterior: null,
    noLaw: null,
  };
}

/** A losing band without a verdict takes that of the nearest losing band that has one. */
function inferOverload(drafts: BandOnset[]): void {
  const loses = ({ detection }: BandOnset): boolean =>
    detection !== null && detection.firstActive <= detection.top;
  const own = drafts.map((draft) => (loses(draft) ? draft.overload : "no verdict"));
  drafts.forEach((draft, b) => {
    if (!loses(draft) || draft.overload !== "no verdict") return;
    for (let away = 1; away < drafts.length; away++) {
      const near = [own[b - away], own[b + away]].find(
        (verdict) => verdict !== undefined && verdict !== "no verdict",
      );
      if (!near) continue;
      draft.overload = near;
      draft.overloadInferred = true;
      return;
    }
  });
}

function likelihoodOf(plan: OnsetPlan, draft: BandOnset): OnsetLikelihood | null {
  const { detection, gains } = draft;
  if (!detection) return null;
  const sigmaAt = (k: number): number =>
    Math.hypot(
      detection.lossSigmaDb[k] ?? 0,
      gains.stepSigmaDb[k] ?? 0,
      0.02 + 0.02 * Math.max(detection.lossDb[k] ?? 0, 0),
    );
  const keys = [...plan.drivesDb.keys()].filter((k) => Number.isFinite(detection.lossDb[k]));
  // Runs that stand clearly on either side of 1/3 dB bound the search; where the first step already loses, nothing does.
  const below = keys.filter(
    (k) =>
      k < detection.firstActive &&
      k > 0 &&
      (detection.lossDb[k] ?? Infinity) + 4 * sigmaAt(k) < ONSET_LOSS_DB,
  );
  const startsFree = detection.firstActive > (keys[1] ?? 0);
  const lowest = plan.drivesDb[keys[0] ?? 0] ?? 0;
  const lowDb =
    below.length > 0
      ? (plan.drivesDb[below.at(-1) ?? 0] ?? 0) - 0.5
      : startsFree
        ? lowest - 2
        : plan.firstOnsetDb;
  const above = keys.find(
    (k) =>
      k >= detection.firstActive && (detection.lossDb[k] ?? 0) - 4 * sigmaAt(k) > ONSET_LOSS_DB,
  );
  const highDb = above === undefined ? Infinity : (plan.drivesDb[above] ?? Infinity) + 0.5;
  return computeLikelihood(plan, gains, detection.lossDb, lowDb, highDb);
}

function conclude(draft: BandOnset, groups: readonly LevelGroup[], isEdge: boolean): BandOnset {
  const { detection, posterior } = draft;
  const settle = (status: OnsetStatus, reason: string, noLaw: NoLaw | null = null): BandOnset => ({
    ...draft,
    status,
    reason,
    noLaw,
  });
  if (!detection) {
    return settle("unresolved", "fewer than two runs stand over the noise in this band");
  }
  const lossDb = detection.lossDb[detection.top] ?? Number.NaN;
  const sigmaDb = detection.lossSigmaDb[detection.top] ?? Number.NaN;
  const topRun = sayRun(groups[detection.top]?.levelDb ?? Number.NaN);
  if (lossDb < ONSET_LOSS_DB || !posterior) {
    if (sigmaDb > BLIND_SIGMA_DB && lossDb + 2 * sigmaDb >= ONSET_LOSS_DB) {
      return settle(
        "unresolved",
        `noise hides 1/3 dB here: ${sayDb(lossDb)} lost in the ${topRun} run, known to ${sayDb(2 * sigmaDb)}`,
      );
    }
    const begins =
      posterior !== null
        ? `; compression begins: ${sayDb(lossDb, 2)} lost in the ${topRun} run`
        : "";
    return settle("not reached", `not reached up to the ${topRun} run${begins}`);
  }
  if (lossDb < REPORTED_SIGMAS * sigmaDb) {
    return settle(
      "unresolved",
      `${sayDb(lossDb)} lost in the ${topRun} run is known only to ${sayDb(2 * sigmaDb)}: too much noise in this band`,
    );
  }
  if (posterior.chiSquare > NO_LAW_CHI_SQUARE + 2 * groups.length) {
    const drives = groups.map(({ driveDb }) => driveDb);
    const noLaw = readNoLaw(detection, draft.gains, drives, isEdge);
    return settle("unresolved", noLaw.reason, noLaw);
  }
  const lowest = [...detection.lossDb.keys()].find((k) => Number.isFinite(detection.lossDb[k]));
  const lowestDriveDb = groups[lowest ?? 0]?.driveDb ?? Number.NaN;
  if (posterior.quantiles(ONSET_LOSS_DB, Infinity).medianDb < lowestDriveDb) {
    return settle(
      "below lowest",
      `already past it at the ${sayRun(groups[lowest ?? 0]?.levelDb ?? Number.NaN)} run`,
    );
  }
  return settle("found", "");
}
