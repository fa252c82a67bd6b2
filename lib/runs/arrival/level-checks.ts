/** Whether the level is the planned one, its step to the siblings right, and how hard the loudspeaker works. */
import { lossOf } from "../../analysis/compression";
import { readSteps } from "../../analysis/onset/steps";
import { sayBands, sayDb, sayHz, sayNumber, sayRun } from "../../analysis/say";
import { isSplValid } from "../../analysis/scale";
import type { ArrivalCheck } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { passed, sayMore, speaking } from "./check";
import { round } from "./file-facts";
import type { SweepFacts } from "./measure-sweep";
import { listShortSiblings, toGroup, type SweepSibling } from "./siblings";

/** What the checks of levels look at: of a sweep, or of a table. */
export type LevelFacts = Pick<SweepFacts, "bands" | "held" | "run" | "thdPercent" | "summary">;

const CLOSING_LIMIT_DB = 0.2;
const LOWEST_THD_LIMIT_PERCENT = 10;
const STOP_THD_PERCENT = 30;
const STOP_LOSS_DB = 6;
/** Bands that lost less than the cluster by this show that the cluster itself is compressed. */
const FREER_DB = 0.15;
const QUIET_SIGMA_DB = 0.05;
/** The hiss of two runs is known to this. */
const HISS_DB = 0.3;
const HISS_SHARE = 0.25;
const SAME_LEVEL_SHARE = 0.5;
/** A level this near to another planned one looks like its file. */
const OTHER_FILE_DB = 1;

const MOVED_REMEDY =
  "Volume and input gain stay as they are over the whole series. If one was moved, set it back and record this run again; if it cannot be set back exactly, record the calibrator again and repeat every level.";

const toLowest = ({ plan }: ArrivalRequest): number =>
  Math.min(...plan.levels.map((level) => level.level_dB));

/** @param measuredDb SPL at 1 m over the reference band. */
export function checkLevelPlan(request: ArrivalRequest, measuredDb: number): ArrivalCheck | null {
  const plannedDb = request.run.place?.levelDb ?? null;
  if (plannedDb === null) return null;
  const offDb = measuredDb - plannedDb;
  const lowest = plannedDb === toLowest(request);
  const { level_fail_dB: failDb, level_warn_dB: warnDb } = request.limits;
  const figure = { value: round(offDb, 2), limit: failDb, unit: "dB" };
  const said = `The level is ${sayDb(measuredDb)} at 1 m; ${sayRun(plannedDb)} was planned.`;
  const valid = isSplValid(request.plan.place.environment);
  // Below the plan is what a series is here to find, except where it starts.
  const overDb = lowest ? Math.abs(offDb) : offDb;
  if (!valid || overDb <= warnDb) {
    return passed("level-plan", {
      title: "level as planned",
      finding: valid ? said : `${said} In this place it is a guide only.`,
      figure,
    });
  }
  const other = request.plan.levels.find(
    ({ level_dB }) => level_dB !== plannedDb && Math.abs(level_dB - measuredDb) < OTHER_FILE_DB,
  );
  const hint =
    other === undefined
      ? ""
      : ` That is the level of the ${sayRun(other.level_dB)} run: was its file played?`;
  return speaking("level-plan", overDb > failDb ? "fail" : "warn", {
    title: sayMore(offDb, "louder than planned", "quieter than planned"),
    finding: `${said}${hint}`,
    spoils: lowest
      ? "The whole ladder stands on this level: every run would be off by as much."
      : "The run would stand for a level that was not played.",
    remedy: lowest
      ? "Set the volume so that the quietest file gives the planned level, leave it there, and record the ladder from this run on. The input gain and the calibrator recording stand."
      : "Check that the stimulus file of this run was played. Volume and input gain stay as they are; record this run again.",
    figure,
  });
}

/** Short runs only: a variant or a hot loudspeaker may differ. */
export function checkLevelStep(request: ArrivalRequest, facts: LevelFacts): ArrivalCheck | null {
  const { place } = request.run;
  if (place?.role !== "short-term" || place.levelDb === null) return null;
  const siblings = listShortSiblings(request);
  const sibling = toNeighbour(siblings, place.levelDb);
  if (sibling === null) return null;
  const own = toGroup(facts.summary, place.levelDb);
  const other = toGroup(sibling.summary, sibling.levelDb);
  const [low, high] = sibling.levelDb <= place.levelDb ? [other, own] : [own, other];
  const bands = facts.bands.length;
  const [reading] = readSteps([high], low, bands);
  const plannedDb = place.levelDb - sibling.levelDb;
  const from = `from the ${sayRun(sibling.levelDb)} run`;
  if (reading === undefined || Number.isNaN(reading.offsetDb)) {
    return passed("level-step", {
      title: "step not readable",
      finding: `The step ${from} cannot be read: no bands agree on it, as where most are limited.`,
    });
  }
  const lossDb = reading.offsetDb;
  const stepDb = Math.abs(plannedDb) - lossDb;
  const { step_warn_dB: warnDb, step_fail_dB: failDb } = request.limits;
  const sizeDb = Math.abs(lossDb);
  const figure = { value: round(sizeDb, 2), limit: failDb, unit: "dB" };
  const said = `The step ${from} measures ${sayDb(stepDb, 2)}; ${sayDb(Math.abs(plannedDb), 2)} was planned.`;
  // Nothing but a control makes a run louder than its step, or two takes of one level differ alike.
  const sure =
    lossDb < 0 ||
    (plannedDb === 0 && reading.share >= SAME_LEVEL_SHARE) ||
    (reading.separable && isLeastCompressed() && (hissFollows() || !isDeep()));
  if (sizeDb <= warnDb || !sure) {
    return passed("level-step", {
      title: sizeDb <= warnDb ? "step as planned" : "all bands under the step",
      finding:
        sizeDb <= warnDb
          ? said
          : `${said} No band is known to be free, so this may be compression of all bands or a control that was moved: sound alone cannot tell.`,
      figure,
    });
  }
  return speaking("level-step", sizeDb > failDb ? "fail" : "warn", {
    title: "level step off",
    finding: said,
    spoils: `Every band would be off by ${sayDb(sizeDb, 2)}, as if it were ${lossDb > 0 ? "compressed" : "less compressed"} by that.`,
    remedy: MOVED_REMEDY,
    figure,
  });

  function isLeastCompressed(): boolean {
    const freer = facts.bands.filter((_, b) => {
      const loss = lossOf(high, low, b);
      return loss.sigmaDb <= QUIET_SIGMA_DB && loss.lossDb < lossDb - FREER_DB;
    });
    return freer.length < 2;
  }

  /** The input gain moves the recorder's hiss along; a limiter does not. */
  function hissFollows(): boolean {
    const [lowHiss, highHiss] =
      low === other
        ? [sibling?.summary.hiss_dBFS, facts.summary.hiss_dBFS]
        : [facts.summary.hiss_dBFS, sibling?.summary.hiss_dBFS];
    if (lowHiss == null || highHiss == null) return false;
    return Math.abs(lowHiss - highHiss - lossDb) < Math.max(HISS_DB, HISS_SHARE * sizeDb);
  }

  /** Bands were limited in the step below already: what holds those back may hold back all. */
  function isDeep(): boolean {
    const below = siblings.findLast((s) => s.levelDb < low.levelDb);
    if (below === undefined) return false;
    const [before] = readSteps([low], toGroup(below.summary, below.levelDb), bands);
    return before?.separable === true;
  }
}

/** Same level first, then the next lower one, then the next higher one. */
function toNeighbour(siblings: readonly SweepSibling[], levelDb: number): SweepSibling | null {
  return (
    siblings.find((s) => s.levelDb === levelDb) ??
    siblings.findLast((s) => s.levelDb < levelDb) ??
    siblings.find((s) => s.levelDb > levelDb) ??
    null
  );
}

export function checkClosing(request: ArrivalRequest, facts: LevelFacts): ArrivalCheck | null {
  const { place } = request.run;
  if (place?.role !== "closing") return null;
  const first = listShortSiblings(request).find(({ levelDb }) => levelDb === place.levelDb);
  if (first === undefined) return null;
  const offDb = facts.summary.level_dBFS - first.summary.level_dBFS;
  const figure = { value: round(offDb, 2), limit: CLOSING_LIMIT_DB, unit: "dB" };
  const said = `The closing run is ${sayDb(Math.abs(offDb), 2)} ${sayMore(offDb, "louder", "quieter")} than the first.`;
  if (Math.abs(offDb) <= CLOSING_LIMIT_DB) {
    return passed("closing-repeat", { title: "as at the start", finding: said, figure });
  }
  return speaking("closing-repeat", "fail", {
    title: "not as at the start",
    finding: said,
    spoils:
      "Something changed during the session, so levels before and after are not on one scale.",
    remedy:
      "Record the calibrator: if it reads as before, let the loudspeaker rest and record this run again. If it does not, the input changed: repeat every level after the new calibrator recording.",
    figure,
  });
}

export function checkLowestDistortion(
  request: ArrivalRequest,
  { thdPercent }: LevelFacts,
): ArrivalCheck | null {
  const { place } = request.run;
  if (place?.role !== "short-term" || place.levelDb !== toLowest(request)) return null;
  const figure = Number.isNaN(thdPercent)
    ? null
    : { value: round(thdPercent, 2), limit: LOWEST_THD_LIMIT_PERCENT, unit: "%" };
  const [low, high] = request.plan.reference_band_Hz;
  if (!(thdPercent > LOWEST_THD_LIMIT_PERCENT)) {
    return passed("distortion-lowest", {
      title: "low distortion",
      finding: Number.isNaN(thdPercent)
        ? "Its harmonics lie in the noise."
        : `THD is ${sayNumber(thdPercent, 2)} % in the reference band.`,
      figure,
    });
  }
  return speaking("distortion-lowest", "fail", {
    title: "distorted at the lowest level",
    finding: `THD is ${sayNumber(thdPercent, 0)} % from ${sayHz(low)} to ${sayHz(high)} already at ${sayRun(place.levelDb)}; under ${LOWEST_THD_LIMIT_PERCENT} % is expected.`,
    spoils: "The lowest run is what all others are held against.",
    remedy:
      "Listen for a rattle or a loose part, and check that neither player, amplifier nor input is overdriven. The input gain stays; record this run again. If the loudspeaker itself distorts so early, plan lower levels.",
    figure,
  });
}

/** A warning about the next level, not about this take. */
export function checkStopRule(
  request: ArrivalRequest,
  { bands, held, run, summary }: LevelFacts,
): ArrivalCheck | null {
  const { place } = request.run;
  if (place?.levelDb == null) return null;
  const { levelDb } = place;
  const first = listShortSiblings(request).find((s) => s.levelDb < levelDb);
  const own = toGroup(summary, levelDb);
  const reference = first === undefined ? null : toGroup(first.summary, first.levelDb);
  const distorted: number[] = [];
  const limited: number[] = [];
  let thd = 0;
  let loss = 0;
  bands.forEach(({ nominalHz }, b) => {
    const band = run.bands[b];
    if (band === undefined || held[b] !== true) return;
    if (band.thdQuality === "measured") {
      thd = Math.max(thd, band.thdPercent);
      if (band.thdPercent > STOP_THD_PERCENT) distorted.push(nominalHz);
    }
    if (reference === null || place.role === "variant") return;
    const { lossDb, sigmaDb } = lossOf(own, reference, b);
    if (!(lossDb - 3 * sigmaDb > -Infinity)) return;
    loss = Math.max(loss, lossDb);
    if (lossDb - 3 * sigmaDb > STOP_LOSS_DB) limited.push(nominalHz);
  });
  if (distorted.length === 0 && limited.length === 0) {
    return passed("stop-rule", {
      title: "may go louder",
      finding: `No band is over ${STOP_THD_PERCENT} % THD or has lost ${STOP_LOSS_DB} dB.`,
    });
  }
  const parts = [
    ...(distorted.length > 0
      ? [`THD reaches ${sayNumber(thd, 0)} % (${sayBands(distorted, 3)}).`]
      : []),
    ...(limited.length > 0
      ? [
          `Up to ${sayDb(loss)} are lost against the ${sayRun(first?.levelDb ?? levelDb)} run (${sayBands(limited, 3)}).`,
        ]
      : []),
  ];
  return speaking("stop-rule", "warn", {
    title: "do not go louder",
    finding: parts.join(" "),
    spoils:
      "This take is good. A louder one may damage the loudspeaker and would tell little more.",
    remedy: `Do not go louder than ${sayRun(levelDb)}: excuse the louder runs and go on to the closing repeat.`,
    figure:
      distorted.length > 0
        ? { value: round(thd, 1), limit: STOP_THD_PERCENT, unit: "%" }
        : { value: round(loss, 2), limit: STOP_LOSS_DB, unit: "dB" },
    bands_Hz: bands
      .map(({ nominalHz }) => nominalHz)
      .filter((hz) => distorted.includes(hz) || limited.includes(hz)),
  });
}
