/** The files to play, as the plan page lists them. */
import { formatNumber, formatPlain, NBSP } from "@/lib/charts/format";
import type { Plan } from "@/lib/series/plan-schema";
import { toFileStem, toLevelText, toPlannedRuns } from "@/lib/series/planned-runs";

export interface StimulusLine {
  /** Under which the file is asked for. */
  slot: string;
  name: string;
  /** "−3.0 dBFS peak", "10 min of pink noise" */
  note: string;
}

/** In capture order; the conditioning of a level stands before its long-term sweep. */
export function listStimulusFiles(plan: Plan, model: string): StimulusLine[] {
  const stem = toFileStem(model);
  return toPlannedRuns(plan, stem).flatMap((run): StimulusLine[] => {
    if (run.stimulusPeakDbfs === null) return [];
    const file = {
      slot: run.slot,
      name: run.fileName,
      note: `${formatNumber(run.stimulusPeakDbfs)}${NBSP}dBFS peak`,
    };
    if (run.role !== "long-term") return [file];
    const number = toLevelText(run.levelDb ?? 0);
    const noise = {
      slot: `conditioning-${number}`,
      name: `${stem}_${number}_conditioning.wav`,
      note: `${formatPlain(plan.conditioning.minutes)}${NBSP}min of pink noise`,
    };
    return [noise, file];
  });
}
