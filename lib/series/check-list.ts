/** What the tester does, in order: on the plan, printed, and as text beside the stimulus files. */
import type { Plan } from "./plan-schema";
import { toLevelText } from "./planned-runs";

const SPACE = "\u00a0";
const CALIBRATOR_S = 15;
const ROOM_NOISE_S = 30;

/** One line per step. A plan without long-term runs says nothing of conditioning, and so on. */
export function toCheckList(plan: Plan): string[] {
  const levels = plan.levels.map((l) => l.level_dB).sort((a, b) => a - b);
  const lowest = `${toLevelText(levels[0] ?? 0)}${SPACE}dB`;
  const { by, level_dB, frequency_Hz } = plan.calibration;
  const lines: string[] = [];
  if (by !== "sensitivity") {
    lines.push(
      `Calibrator on the microphone: ${toLevelText(level_dB)}${SPACE}dB, ${toTone(frequency_Hz)}, ${CALIBRATOR_S}${SPACE}s`,
    );
  }
  if (plan.ambient) lines.push(`Room noise, ${ROOM_NOISE_S}${SPACE}s, nothing playing`);
  lines.push(`Gain set once on the ${lowest} file: reads ${lowest}`);
  lines.push("Levels upwards; wait for each check");
  lines.push(`Stop at 30${SPACE}% THD or 6${SPACE}dB compression`);
  for (const variant of plan.variants) {
    lines.push(`${toLevelText(variant.level_dB)}${SPACE}dB again, ${variant.text}`);
  }
  const { minutes, gap_s } = plan.conditioning;
  for (const level of plan.levels.filter((l) => l.long_term)) {
    lines.push(
      `${toLevelText(level.level_dB)}${SPACE}dB: condition ${toLevelText(minutes)}${SPACE}min, stay there, sweep within ${toLevelText(gap_s)}${SPACE}s`,
    );
  }
  const after = by === "calibrator-before-after";
  if (plan.closing) {
    lines.push(`Closing repeat of ${lowest}${after ? ", then calibrator again" : ""}`);
  } else if (after) {
    lines.push("Calibrator again");
  }
  return lines;
}

const toTone = (frequencyHz: number): string =>
  frequencyHz >= 1000
    ? `${toLevelText(frequencyHz / 1000)}${SPACE}kHz`
    : `${toLevelText(frequencyHz)}${SPACE}Hz`;
