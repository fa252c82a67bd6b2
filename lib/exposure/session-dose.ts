/**
 * What a planned series does to the ears of who records it.
 *
 * The planned level counts as dB(A): it is defined over 500 Hz to 2 kHz, where A-weighting is
 * nearly 0 dB, and how the loudspeaker plays elsewhere is not known before it is measured. For a
 * flat loudspeaker this is about 3 dB on the safe side.
 */
import type { Plan } from "../series/plan-schema";
import { toDoseText, toLevelText, toTimeText } from "./words";
import { computeAllowedS, computeDose, DAY_RULES, type DayRuleName, type Exposure } from "./rules";

/**
 * dB by which the level at 1 m is lower at the tester's place. Indoors distance takes nothing off;
 * a closed door 20 dB (common practice, no source); 10 m in the open 20 lg 10.
 */
export const TESTER_REDUCTION_DB = {
  "in-room": 0,
  "next-room": 20,
  "outdoors-10m": 20,
} as const satisfies Record<Plan["place"]["tester"], number>;

export type DoseLineKind = "sweeps" | "conditioning" | "long-term" | "closing";

/** One row of the dose table. */
export interface DoseLine {
  kind: DoseLineKind;
  /** How many sweeps, or how many times conditioned. */
  count: number;
  /** Lowest and highest level at the tester's place, dB(A). */
  fromDbA: number;
  toDbA: number;
  durationS: number;
  /** Share of the day's allowance. */
  dose: number;
  /** Words for the row, with planned levels: "8 sweeps, 76 to 102 dB, one repeat each". */
  label: string;
}

export interface SessionDose {
  rule: DayRuleName;
  ruleName: string;
  tester: Plan["place"]["tester"];
  /** Highest level at the tester's place, dB(A), not rounded. */
  levelAtTesterDbA: number;
  /** Highest instantaneous level at the tester's place, dB(C). */
  peakAtTesterDbC: number;
  lines: DoseLine[];
  dose: number;
  /** How long the highest level may last in a day. */
  allowedAtHighestS: number;
  /** Lowest planned level that uses up a day's allowance within the hour; null where none does. */
  leaveRoomFromDb: number | null;
}

const SINE_CREST_DB = 20 * Math.log10(Math.SQRT2);
const SPACE = "\u00a0";
const HOUR_S = 3600;

/**
 * Level at the tester's place, and the dose of the planned session line by line.
 * Counted are all sweeps with their repeats and variants, conditioning, long-term sweeps and the closing repeat.
 */
export function computeSessionDose(plan: Plan, rule: DayRuleName): SessionDose {
  const dayRule = DAY_RULES[rule];
  const reductionDb = TESTER_REDUCTION_DB[plan.place.tester];
  const levels = [...plan.levels].sort((a, b) => a.level_dB - b.level_dB);
  const lowestDb = levels[0]?.level_dB ?? 0;
  const highestDb = levels.at(-1)?.level_dB ?? 0;
  const sweepS = plan.sweep.length_s;

  const toLine = (
    kind: DoseLineKind,
    label: string,
    played: { levelDb: number; durationS: number }[],
  ): DoseLine => {
    const heard: Exposure[] = played.map((p) => ({
      levelDbA: p.levelDb - reductionDb,
      durationS: p.durationS,
    }));
    return {
      kind,
      label,
      count: played.length,
      fromDbA: Math.min(...heard.map((h) => h.levelDbA)),
      toDbA: Math.max(...heard.map((h) => h.levelDbA)),
      durationS: heard.reduce((sum, h) => sum + h.durationS, 0),
      dose: computeDose(heard, dayRule),
    };
  };

  const sweeps = [
    ...levels.flatMap((l) => Array.from({ length: 1 + l.repeats }, () => l.level_dB)),
    ...plan.variants.map((v) => v.level_dB),
  ].map((levelDb) => ({ levelDb, durationS: sweepS }));
  const lines = [toLine("sweeps", toSweepsLabel(plan, sweeps.length, lowestDb, highestDb), sweeps)];

  const { minutes, rms_re_sweep_dB: rmsDb, crest_dB: crestDb } = plan.conditioning;
  const longTerm = levels.filter((l) => l.long_term);
  for (const { level_dB } of longTerm) {
    const label = `${toPlain(minutes)}${SPACE}min conditioning at ${toPlain(level_dB + rmsDb)}${SPACE}dB`;
    lines.push(
      toLine("conditioning", label, [{ levelDb: level_dB + rmsDb, durationS: minutes * 60 }]),
    );
    lines.push(
      toLine("long-term", `long-term sweep at ${toPlain(level_dB)}${SPACE}dB`, [
        { levelDb: level_dB, durationS: sweepS },
      ]),
    );
  }
  if (plan.closing) {
    lines.push(
      toLine("closing", `closing repeat at ${toPlain(lowestDb)}${SPACE}dB`, [
        { levelDb: lowestDb, durationS: sweepS },
      ]),
    );
  }

  const levelAtTesterDbA = Math.max(...lines.map((l) => l.toDbA));
  const peaks = [highestDb + SINE_CREST_DB, ...longTerm.map((l) => l.level_dB + rmsDb + crestDb)];
  return {
    rule,
    ruleName: dayRule.name,
    tester: plan.place.tester,
    levelAtTesterDbA,
    peakAtTesterDbC: Math.max(...peaks) - reductionDb,
    lines,
    dose: lines.reduce((sum, l) => sum + l.dose, 0),
    allowedAtHighestS: computeAllowedS(levelAtTesterDbA, dayRule),
    leaveRoomFromDb:
      levels.find((l) => computeAllowedS(l.level_dB - reductionDb, dayRule) < HOUR_S)?.level_dB ??
      null,
  };
}

function toSweepsLabel(plan: Plan, count: number, lowestDb: number, highestDb: number): string {
  const parts = [`${count} sweeps`, `${toPlain(lowestDb)} to ${toPlain(highestDb)}${SPACE}dB`];
  const repeats = new Set(plan.levels.map((l) => l.repeats));
  const [each] = repeats;
  const total = plan.levels.reduce((sum, l) => sum + l.repeats, 0);
  if (repeats.size === 1 && each === 1) parts.push("one repeat each");
  else if (repeats.size === 1 && each !== undefined && each > 1) parts.push(`${each} repeats each`);
  else if (total > 0) parts.push(`${total} of them repeats`);
  if (plan.variants.length > 0) {
    parts.push(plan.variants.length === 1 ? "one variant" : `${plan.variants.length} variants`);
  }
  return parts.join(", ");
}

function toPlain(value: number): string {
  return String(Math.round(value * 10) / 10).replace("-", "\u2212");
}

/** What one further run costs who records it. */
export interface RunCost {
  /** From the first sound to the end of the recording, conditioning included, s. */
  takesS: number;
  /** Highest level at the tester's place, dB(A). */
  levelAtTesterDbA: number;
  /** Share of the day's allowance. */
  dose: number;
}

/** @param kind a long-term run has its conditioning before it. */
export function computeRunCost(
  plan: Pick<Plan, "sweep" | "conditioning" | "place">,
  run: { levelDb: number; kind: "short-term" | "long-term" },
  rule: DayRuleName,
): RunCost {
  const { length_s: sweepS, lead_in_s: inS, lead_out_s: outS } = plan.sweep;
  const { minutes, rms_re_sweep_dB: rmsDb, gap_s: gapS } = plan.conditioning;
  const atTesterDbA = run.levelDb - TESTER_REDUCTION_DB[plan.place.tester];
  const sweep: Exposure = { levelDbA: atTesterDbA, durationS: sweepS };
  const conditioning: Exposure[] =
    run.kind === "long-term" ? [{ levelDbA: atTesterDbA + rmsDb, durationS: 60 * minutes }] : [];
  const heard = [...conditioning, sweep];
  return {
    takesS: inS + sweepS + outS + (run.kind === "long-term" ? 60 * minutes + gapS : 0),
    levelAtTesterDbA: Math.max(...heard.map(({ levelDbA }) => levelDbA)),
    dose: computeDose(heard, DAY_RULES[rule]),
  };
}

/** "It takes 13 s, at 91 dB(A) where the tester stands: 0.18 % of the day's allowance (NIOSH)." */
export function toRunCostSentence(cost: RunCost, rule: DayRuleName): string {
  const time = toTimeText(Math.ceil(cost.takesS), { seconds: true });
  return `It takes ${time}, at ${toLevelText(cost.levelAtTesterDbA, "dB(A)")} where the tester stands: ${toDoseText(cost.dose)} of the day\u2019s allowance (${DAY_RULES[rule].name}).`;
}
