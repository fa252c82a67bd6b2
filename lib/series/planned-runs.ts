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
  /** An analyst asked for it after the plan was fixed. */
  asked?: { by: string; reason: string } | undefined;
}

/** A run that was asked for, with the place that was opened for it. */
export interface RequestedRun {
  slot: string;
  levelDb: number;
  kind: "short-term" | "long-term";
  variant: string | null;
  by: string;
  reason: string;
}

const STIMULUS_TOP_DBFS = -3;

/**
 * @param fileStem from toFileStem(model). Runs come in capture order: before, ladder upwards, after.
 * @param requested runs that were asked for later; each stands at the end of its level.
 */
export function toPlannedRuns(
  plan: Plan,
  fileStem: string,
  requested: readonly RequestedRun[] = [],
): PlannedRun[] {
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
  for (const request of requested) {
    const run = toAskedRun(request, fileStem, peak(request.levelDb));
    const louder = runs.findIndex(
      (other) => IN_LADDER.has(other.role) && (other.levelDb ?? -Infinity) > request.levelDb,
    );
    const last = runs.findLastIndex((other) => IN_LADDER.has(other.role));
    runs.splice(louder < 0 ? last + 1 : louder, 0, run);
  }
  const names = new Map(plan.files?.map(({ slot, file }) => [slot, file]));
  const given = new Set(names.values());
  // A name of ours gives way to one that came with a folder: no two runs share one.
  const toName = ({ slot, fileName }: PlannedRun): string =>
    names.get(slot) ?? (given.has(fileName) ? `another_${fileName}` : fileName);
  return runs.map((run) => ({ ...run, fileName: toName(run) }));
}

const IN_LADDER: ReadonlySet<RecordingRole> = new Set(["short-term", "long-term", "variant"]);

/** The number at the end of its slot tells one repeat of a level from the next. */
function toAskedRun(request: RequestedRun, fileStem: string, peakDbfs: number): PlannedRun {
  const { slot, levelDb, kind, variant, by, reason } = request;
  const number = toLevelText(levelDb);
  const nth = /-(\d+)$/.exec(slot.slice(slot.indexOf(`-${number}`) + number.length + 1))?.[1];
  const repeat = nth === undefined ? 1 : Number(nth);
  const again = repeat === 1 ? "" : `, repeat ${repeat - 1}`;
  const name = variant === null ? kind.replace("-term", "") : "variant_asked";
  return {
    slot,
    role: variant === null ? kind : "variant",
    levelDb,
    repeat,
    variant,
    label: variant === null ? `${number} dB ${kind}${again}` : `${number} dB, ${variant}${again}`,
    fileName: `${fileStem}_${number}_${name}${repeat === 1 ? "" : `_r${repeat}`}.wav`,
    stimulusPeakDbfs: peakDbfs,
    asked: { by, reason },
  };
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
