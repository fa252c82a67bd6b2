/** The recordings that a plan asks for, in the order in which they are made. */
import type { Plan } from "./plan-schema";

export const RECORDING_ROLES = [
  "calibrator-before",
  "ambient",
  "short-term",
  "long-term",
  "variant",
  "closing",
  "calibrator-after",
] as const;
export type RecordingRole = (typeof RECORDING_ROLES)[number];

export interface PlannedRun {
  /** Stable key of the place in the plan, for example "short-76", "short-76-2", "long-102". */
  slot: string;
  role: RecordingRole;
  /** Level on the scale of the plan, dB; null for calibrator and room noise. */
  levelDb: number | null;
  /** 1 for the first run of a level, 2 and up for its repeats. */
  repeat: number;
  variant: string | null;
  /** Words for the row, for example "76 dB short-term". */
  label: string;
  /** The name that the stimulus file carries, and by which a recording is matched. */
  fileName: string;
  /** Peak of the stimulus re digital full scale, dB; null where nothing of ours is played. */
  stimulusPeakDbfs: number | null;
}

const STIMULUS_TOP_DBFS = -3;

/** @param fileStem from toFileStem(model). Runs come in capture order: before, ladder upwards, after. */
export function toPlannedRuns(plan: Plan, fileStem: string): PlannedRun[] {
  const levels = [...plan.levels].sort((a, b) => a.level_dB - b.level_dB);
  const lowest = levels[0]?.level_dB ?? 0;
  const highest = levels.at(-1)?.level_dB ?? 0;
  const peak = (levelDb: number): number => STIMULUS_TOP_DBFS - (highest - levelDb);
  const runs: PlannedRun[] = [];
  const add = (run: Omit<PlannedRun, "fileName"> & { stem: string }): void => {
    const { stem, ...rest } = run;
    runs.push({ ...rest, fileName: `${fileStem}_${stem}.wav` });
  };
  const plain = { repeat: 1, variant: null, levelDb: null, stimulusPeakDbfs: null } as const;
  const calibrated = plan.calibration.by !== "sensitivity";

  if (calibrated) {
    add({
      ...plain,
      slot: "calibrator-before",
      role: "calibrator-before",
      label: "calibrator",
      stem: "calibrator",
    });
  }
  if (plan.ambient) {
    add({ ...plain, slot: "ambient", role: "ambient", label: "room noise", stem: "room" });
  }
  for (const { level_dB, repeats, long_term } of levels) {
    const number = toLevelText(level_dB);
    for (let repeat = 1; repeat <= 1 + repeats; repeat += 1) {
      const suffix = repeat === 1 ? "" : `-${repeat}`;
      add({
        slot: `short-${number}${suffix}`,
        role: "short-term",
        levelDb: level_dB,
        repeat,
        variant: null,
        label: `${number} dB short-term${repeat === 1 ? "" : `, repeat ${repeat - 1}`}`,
        stem: `${number}_short${suffix.replace("-", "_r")}`,
        stimulusPeakDbfs: peak(level_dB),
      });
    }
    plan.variants.forEach((variant, index) => {
      if (variant.level_dB !== level_dB) return;
      add({
        slot: `variant-${index + 1}-${number}`,
        role: "variant",
        levelDb: level_dB,
        repeat: 1,
        variant: variant.text,
        label: `${number} dB, ${variant.text}`,
        stem: `${number}_variant${index + 1}`,
        stimulusPeakDbfs: peak(level_dB),
      });
    });
    if (long_term) {
      add({
        slot: `long-${number}`,
        role: "long-term",
        levelDb: level_dB,
        repeat: 1,
        variant: null,
        label: `${number} dB long-term`,
        stem: `${number}_long`,
        stimulusPeakDbfs: peak(level_dB),
      });
    }
  }
  if (plan.closing) {
    const number = toLevelText(lowest);
    add({
      slot: `closing-${number}`,
      role: "closing",
      levelDb: lowest,
      repeat: 1,
      variant: null,
      label: `${number} dB closing repeat`,
      stem: `${number}_closing`,
      stimulusPeakDbfs: peak(lowest),
    });
  }
  if (plan.calibration.by === "calibrator-before-after") {
    add({
      ...plain,
      slot: "calibrator-after",
      role: "calibrator-after",
      label: "calibrator, after",
      stem: "calibrator_after",
    });
  }
  return runs;
}

/** "Osier 5A" becomes "osier5a". Never empty. */
export function toFileStem(model: string): string {
  const stem = model
    .normalize("NFKD")
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, "")
    .slice(0, 40);
  return stem === "" ? "series" : stem;
}

/** 76 stays "76", 76.5 becomes "76.5". */
export function toLevelText(levelDb: number): string {
  return String(Math.round(levelDb * 100) / 100);
}
