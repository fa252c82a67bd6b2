/** Whether the planned sweep is there, whole, undisturbed and over the noise. */
import { toDriftUncertaintyPpm } from "../../analysis/drift";
import { sayBands, sayHz, sayNumber } from "../../analysis/say";
import type { LabSettings } from "../../labs/settings-schema";
import type { ArrivalCheck } from "../arrival-schema";
import type { DelayStep } from "./band-arrivals";
import { AGAIN_REMEDY, passed, sayCount, speaking } from "./check";
import { round } from "./file-facts";
import type { SweepFacts, SweepLook } from "./measure-sweep";
import { toBandsBetween, toHz, toPlace, toTimeS } from "./sweep-timeline";

const MISSING_LIMIT_S = 0.01;
const DRIFT_LIMIT_PPM = 200;

/** No two clocks of players and recorders lie further apart: the sweep itself is another one. */
const CLOCKS_LIMIT_PPM = 1000;

const sayS = (seconds: number): string => `${seconds.toFixed(2)} s`;
const sayAt = (hz: number): string => sayHz(Number(hz.toPrecision(hz < 100 ? 2 : 3)));

/** @returns the failure of a recording without the planned sweep. */
export function sayNoSweep({ verdict, found, timeline }: SweepLook): ArrivalCheck {
  const { sweep, lengthS } = timeline;
  const planned = `${sayHz(sweep.startHz)} to ${sayHz(sweep.stopHz)} in ${sayS(sweep.lengthS)}`;
  const { compactness, spreadS } = found.arrival;
  if (verdict === "another") {
    return speaking("sweep-identity", "fail", {
      title: "another sweep",
      finding: `A sweep is there, but not the planned one (${planned}): what it plays at 2 kHz comes ${sayNumber(1000 * Math.abs(spreadS), 0)} ms too ${spreadS > 0 ? "late" : "early"} after 500 Hz.`,
      spoils: "Levels and harmonics would be read at the wrong frequencies.",
      remedy:
        "Download the stimulus file of this level anew, play it as it is, without speed or rate conversion, and record this run again at the same gain.",
      figure: { value: round(1000 * Math.abs(spreadS), 1), limit: 20, unit: "ms" },
    });
  }
  if (lengthS < sweep.lengthS) {
    return speaking("sweep-complete", "fail", {
      title: "too short",
      finding: `The recording lasts ${sayS(lengthS)}; the sweep alone lasts ${sayS(sweep.lengthS)}, and what is here does not reach the middle frequencies.`,
      spoils: "No level can be computed.",
      remedy: AGAIN_REMEDY,
      figure: { value: round(lengthS, 2), limit: round(sweep.lengthS, 2), unit: "s" },
    });
  }
  return speaking("sweep-present", "fail", {
    title: "no sweep found",
    finding: `The planned sweep (${planned}) was not found: only ${sayNumber(100 * compactness, 0)} % of what answers to it arrives together; half is needed.`,
    spoils: "There is nothing to measure in it.",
    remedy:
      "Check that the stimulus of this level was playing, that the loudspeaker was on, and that this file belongs to this run. Then record the run again at the same gain.",
    figure: { value: round(100 * compactness, 1), limit: 50, unit: "%" },
  });
}

export function sayPresent({ found, timeline }: SweepLook): ArrivalCheck[] {
  return [
    passed("sweep-present", {
      title: "sweep found",
      finding: `The sweep starts at ${sayS(timeline.startS)}.`,
      figure: { value: round(100 * found.arrival.compactness, 1), limit: 50, unit: "%" },
    }),
    passed("sweep-identity", { title: "the planned sweep", finding: "It is the planned sweep." }),
  ];
}

export function checkComplete({ timeline, bands, held, raw }: SweepFacts): ArrivalCheck {
  const { sweep, startS, endS, lengthS } = timeline;
  const missingS = raw.missing / sweep.rateHz;
  const figure = { value: round(missingS, 3), limit: MISSING_LIMIT_S, unit: "s" };
  if (missingS <= MISSING_LIMIT_S) {
    return passed("sweep-complete", {
      title: "whole sweep",
      finding: "The recording holds the whole sweep.",
      figure,
    });
  }
  const lost = bands.filter((_, b) => held[b] !== true).map(({ nominalHz }) => nominalHz);
  const late = startS < 0;
  const edge = sayAt(toHz(timeline, late ? 0 : lengthS));
  const parts = [
    ...(late ? [`The recording starts ${sayS(-startS)} into the sweep, at ${edge}.`] : []),
    ...(endS > lengthS
      ? [
          `The file stops after ${sayS(lengthS)} of ${sayS(endS)}: the sweep ends at ${sayAt(toHz(timeline, lengthS))}.`,
        ]
      : []),
  ];
  return speaking("sweep-complete", "fail", {
    title: late && endS <= lengthS ? "starts late" : "stops early",
    finding: parts.join(" "),
    spoils:
      lost.length === 0
        ? "The very end of the sweep is missing; no band is lost."
        : `${toSpan(lost, bands[0]?.nominalHz, bands.at(-1)?.nominalHz)} missing in this run, ${lost.length} of ${bands.length}.`,
    remedy: `${AGAIN_REMEDY} ${late ? "Start the recorder before the player." : "Let the recorder run until after the end of the file."}`,
    figure,
    where: endS > lengthS ? toPlace(timeline, lengthS, endS) : toPlace(timeline, startS, 0),
    bands_Hz: lost,
  });
}

function toSpan(lost: readonly number[], first?: number, last?: number): string {
  const [low, high] = [lost[0], lost.at(-1)];
  if (low === undefined || high === undefined) return "Bands are";
  if (low === high) return `The ${sayHz(low)} band is`;
  if (high === last) return `Bands from ${sayHz(low)} up are`;
  return low === first ? `Bands up to ${sayHz(high)} are` : `Bands ${sayBands(lost)} are`;
}

export function checkDropped(
  { timeline, bands }: SweepFacts,
  step: DelayStep | null,
): ArrivalCheck {
  if (step === null) {
    return passed("dropped-samples", {
      title: "no gaps",
      finding: "No samples are missing or doubled within the sweep.",
    });
  }
  const count = Math.round(Math.abs(step.delayS) * timeline.sweep.rateHz);
  const fromS = toTimeS(timeline, step.fromHz);
  const toS = toTimeS(timeline, step.toHz);
  const lost = step.delayS < 0;
  const samples = count === 1 ? "sample" : "samples";
  return speaking("dropped-samples", "fail", {
    title: lost ? "dropped samples" : "inserted samples",
    finding: `About ${sayCount(count)} ${samples} (${sayNumber(1000 * Math.abs(step.delayS), 1)} ms) ${lost ? "were dropped" : "too many stand"} between ${sayS(fromS)} and ${sayS(toS)}, at ${sayAt(step.fromHz)} to ${sayAt(step.toHz)}.`,
    spoils:
      "What the sweep plays from there on is read at the wrong moment, and the jump looks like distortion.",
    remedy:
      "Close other programs, or give the recorder a larger buffer. The calibration stands: record this run again at the same gain.",
    figure: { value: count, limit: 0, unit: "samples" },
    where: toPlace(timeline, fromS, toS),
    bands_Hz: toBandsBetween(timeline, bands, fromS, toS),
  });
}

export function checkDrift({ raw, timeline }: SweepFacts): ArrivalCheck | null {
  const { driftPpm } = raw;
  if (!Number.isFinite(driftPpm)) return null;
  const unsure = toDriftUncertaintyPpm(timeline.sweep.rateConstantS);
  const limit = Math.max(DRIFT_LIMIT_PPM, round(unsure, 0));
  const figure = { value: round(driftPpm, 1), limit, unit: "ppm" };
  if (Math.abs(driftPpm) <= limit) {
    return passed("clock-drift", {
      title: "clocks agree",
      finding: `Player and recorder differ by ${sayNumber(driftPpm, 0)} ppm, which a loudspeaker's own delay can feign up to ${sayNumber(unsure, 0)} ppm.`,
      figure,
    });
  }
  const most = Math.max(CLOCKS_LIMIT_PPM, 4 * limit);
  if (Math.abs(driftPpm) > most) {
    const { startHz, stopHz, lengthS } = timeline.sweep;
    return speaking("sweep-identity", "fail", {
      title: "another sweep",
      finding: `A sweep is there, but not the planned one (${sayHz(startHz)} to ${sayHz(stopHz)} in ${sayS(lengthS)}): it runs ${sayNumber(Math.abs(driftPpm) / 10_000, 2)} % too ${driftPpm > 0 ? "fast" : "slow"} for that, more than two clocks can differ.`,
      spoils: "Levels and harmonics would be read at the wrong frequencies.",
      remedy:
        "Check start, end and length of the sweep in the plan against the file that was played. If the plan is right, download the stimulus file of this level anew, play it without speed or rate conversion, and record this run again at the same gain.",
      figure: { value: round(driftPpm, 0), limit: most, unit: "ppm" },
    });
  }
  return speaking("clock-drift", "fail", {
    title: "clocks drift apart",
    finding: `Player and recorder differ by ${sayNumber(driftPpm, 0)} ppm; up to ${limit} ppm is accepted.`,
    spoils: "Frequencies and the harmonics' places are off along the sweep.",
    remedy:
      "Play and record with one interface, or lock both to one clock, at the planned rate. If that changes the input, record the calibrator again and repeat every level; else repeat this run.",
    figure,
  });
}

export function checkSignalToNoise(
  { raw, run, bands, held }: SweepFacts,
  limits: LabSettings["arrival"],
): ArrivalCheck | null {
  const { snrDb } = raw;
  if (Number.isNaN(snrDb)) return null;
  const { snr_warn_dB: warnDb, snr_fail_dB: failDb } = limits;
  const weak = bands.filter(
    (_, b) => held[b] === true && !((run.bands[b]?.snrDb ?? Infinity) >= failDb),
  );
  const lost = weak.map(({ nominalHz }) => nominalHz);
  const figure = Number.isFinite(snrDb)
    ? { value: round(snrDb, 1), limit: failDb, unit: "dB" }
    : null;
  const level = Number.isFinite(snrDb)
    ? `The sweep stands ${sayNumber(snrDb, 0)} dB over the noise in the reference band`
    : "No noise was recorded beside the sweep";
  const named = lost.length === 0 ? "" : ` Under ${failDb} dB: ${sayBands(lost, 9)}.`;
  if (snrDb >= warnDb && lost.length === 0) {
    return passed("signal-to-noise", { title: "clear of the noise", finding: `${level}.`, figure });
  }
  const fails = snrDb < failDb;
  return speaking("signal-to-noise", fails ? "fail" : "warn", {
    title:
      fails || snrDb < warnDb
        ? "too near the noise"
        : `${lost.length === 1 ? "a band" : "bands"} near the noise`,
    finding: `${level}${fails ? `; ${failDb} dB are needed` : ""}.${named}`,
    spoils: fails
      ? "Noise lifts the level, and every louder run would look compressed against it."
      : lost.length === 0
        ? "Low harmonics cannot be told from the noise."
        : "Levels there are uncertain, and their harmonics lie in the noise.",
    remedy: fails
      ? "Quieten the room (ventilation, people, traffic) and record this run again at the same gain. If that is not enough, plan a longer sweep or a louder lowest level and repeat every level."
      : "If you need them, quieten the room and record this run again at the same gain.",
    figure,
    bands_Hz: lost,
  });
}
