/** The calibrator's tone: there, at the right frequency, steady, and the same before and after. */
import { measureTone, type Tone } from "../../analysis/calibration";
import type { Plans } from "../../analysis/cell-power";
import { sayDb, sayHz, sayNumber } from "../../analysis/say";
import type { Recording } from "../../analysis/types";
import { AnalysisError } from "../../errors/app-error";
import type { ArrivalCheck, ArrivalReport } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { passed, speaking } from "./check";
import { round } from "./file-facts";
import { findTones } from "./siblings";

const FREQUENCY_LIMIT = 0.02;
const SPREAD_LIMIT_DB = 0.2;
const AGREEMENT_LIMIT_DB = 0.5;
/** Frequencies that calibrators give, for a word on which one it was. */
const USUAL_HZ = [250, 500, 1000, 2000, 4000] as const;

export interface CalibratorFindings {
  checks: ArrivalCheck[];
  tone: NonNullable<ArrivalReport["tone"]> | null;
  purityDb: number | null;
}

export function checkCalibrator(
  request: ArrivalRequest,
  recording: Recording,
  plans: Plans,
): CalibratorFindings {
  const { frequency_Hz: nominalHz } = request.plan.calibration;
  const tone = findTone(recording, nominalHz, plans);
  if (tone === null) {
    return { checks: [sayNoTone(recording, nominalHz, plans)], tone: null, purityDb: null };
  }
  const summary = {
    frequency_Hz: round(tone.frequencyHz, 2),
    level_dBFS: round(20 * Math.log10(tone.amplitude), 3),
  };
  const agreement = checkAgreement(request, summary.level_dBFS);
  return {
    checks: [checkTone(tone, nominalHz), ...(agreement === null ? [] : [agreement])],
    tone: summary,
    purityDb: tone.purityDb,
  };
}

function findTone(recording: Recording, hz: number, plans: Plans): Tone | null {
  try {
    return measureTone(recording, hz, plans);
  } catch (error) {
    if (error instanceof AnalysisError) return null;
    throw error;
  }
}

const TONE_REMEDY =
  "Put the calibrator on tightly, wait until its level stands, and record at least 10 s without touching it, at the gain of the runs.";

function sayNoTone(recording: Recording, nominalHz: number, plans: Plans): ArrivalCheck {
  const other = USUAL_HZ.filter((hz) => hz !== nominalHz)
    .map((hz) => findTone(recording, hz, plans))
    .filter((tone) => tone !== null)
    .sort((a, b) => b.amplitude - a.amplitude)[0];
  const found =
    other === undefined
      ? "no steady tone stands out"
      : `the tone is at ${sayHz(round(other.frequencyHz, 0))}`;
  return speaking("calibrator-tone", "fail", {
    title: other === undefined ? "no calibrator tone" : "wrong frequency",
    finding: `A tone of ${sayHz(nominalHz)} was planned; ${found}.`,
    spoils: "Without it no level of this series can be told.",
    remedy:
      other === undefined
        ? TONE_REMEDY
        : "Set the calibrator to the planned frequency and record it again, or plan this frequency if it is the right one.",
    figure:
      other === undefined
        ? null
        : { value: round(other.frequencyHz, 1), limit: nominalHz, unit: "Hz" },
  });
}

function checkTone({ frequencyHz, spreadDb }: Tone, nominalHz: number): ArrivalCheck {
  if (Math.abs(frequencyHz / nominalHz - 1) > FREQUENCY_LIMIT) {
    return speaking("calibrator-tone", "fail", {
      title: "wrong frequency",
      finding: `The tone is at ${sayNumber(frequencyHz, 1)} Hz; ${sayHz(nominalHz)} was planned.`,
      spoils: "It may come from another calibrator, or from a recorder at another rate.",
      remedy: `Check the calibrator and the rate of the recorder. ${TONE_REMEDY}`,
      figure: { value: round(frequencyHz, 1), limit: nominalHz, unit: "Hz" },
    });
  }
  const figure = { value: round(spreadDb, 3), limit: SPREAD_LIMIT_DB, unit: "dB" };
  if (spreadDb > SPREAD_LIMIT_DB) {
    return speaking("calibrator-tone", "fail", {
      title: "calibrator not steady",
      finding: `The tone wanders by ${sayDb(spreadDb, 2)}; within ${sayDb(SPREAD_LIMIT_DB, 1)} is steady.`,
      spoils: "Every level of the series would be uncertain by as much.",
      remedy: `Check the seat of the calibrator and its battery. ${TONE_REMEDY}`,
      figure,
    });
  }
  return passed("calibrator-tone", {
    title: "steady tone",
    finding: `${sayNumber(frequencyHz, 1)} Hz, steady within ${sayDb(Math.max(0.01, spreadDb), 2)}.`,
    figure,
  });
}

function checkAgreement({ run, siblings }: ArrivalRequest, levelDbfs: number): ArrivalCheck | null {
  const { before, after } = findTones(siblings);
  const isAfter = run.place?.role === "calibrator-after";
  const other = isAfter ? before : after;
  if (other === null) return null;
  const changeDb = isAfter ? levelDbfs - other.level_dBFS : other.level_dBFS - levelDbfs;
  const figure = { value: round(changeDb, 2), limit: AGREEMENT_LIMIT_DB, unit: "dB" };
  const said = `After the runs the calibrator reads ${sayDb(Math.abs(changeDb), 2)} ${changeDb < 0 ? "lower" : "higher"} than before.`;
  if (Math.abs(changeDb) <= AGREEMENT_LIMIT_DB) {
    return passed("calibrator-agreement", {
      title: "same before and after",
      finding: said,
      figure,
    });
  }
  return speaking("calibrator-agreement", "fail", {
    title: "not the level of before",
    finding: `${said} Up to ${sayDb(AGREEMENT_LIMIT_DB, 1)} is accepted.`,
    spoils: "Gain or microphone changed in between, and no one can say at which run.",
    remedy:
      "Seat the calibrator anew and record it again. If it still differs, leave the gain as it is now, keep this recording as the one before, and repeat every level.",
    figure,
  });
}
