/** What the plan form holds, and what it says where a field is at fault. */
import { z } from "zod";
import { loudspeakerInputSchema } from "@/lib/api/loudspeakers";
import { planSchema } from "@/lib/series/plan-schema";

export const NEW_LOUDSPEAKER = "new";

export const planFormSchema = z.object({
  /** An id, or NEW_LOUDSPEAKER. */
  loudspeakerId: z.string().min(1, "Choose a loudspeaker."),
  loudspeaker: loudspeakerInputSchema,
  plan: planSchema,
});
/** As the fields hold it while it is being written: numbers may be null or NaN. */
export type PlanFormInput = z.input<typeof planFormSchema>;
export type PlanFormOutput = z.output<typeof planFormSchema>;

/**
 * A number as people write it: decimal comma or point, true minus, spaces between thousands.
 *
 * @returns null for an empty field, NaN for what is no number.
 */
export function parseNumber(text: unknown): number | null {
  if (typeof text === "number" || text === null) return text;
  if (typeof text !== "string") return Number.NaN;
  const plain = text.replaceAll(/[\s\u2009\u00a0\u202f]/g, "").replaceAll("\u2212", "-");
  if (plain === "") return null;
  const point = plain.includes(".") ? plain : plain.replace(",", ".");
  return /^[+-]?(\d+\.?\d*|\.\d+)$/.test(point) ? Number(point) : Number.NaN;
}

const UNITS: readonly (readonly [ending: string, unit: string])[] = [
  ["_Hz", "Hz"],
  ["_dB", "dB"],
  ["_ms", "ms"],
  ["_m", "m"],
  ["_s", "s"],
  ["_C", "°C"],
  ["_percent", "%"],
  ["minutes", "min"],
];

function toUnit(path: readonly PropertyKey[]): string {
  const name = path.findLast((part) => typeof part === "string");
  const unit = UNITS.find(([ending]) => typeof name === "string" && name.endsWith(ending))?.[1];
  return unit === undefined ? "" : `\u00a0${unit}`;
}

const toFigure = (value: number | bigint): string => String(value).replace("-", "\u2212");

/** Words for the faults that the schema itself leaves to zod; undefined keeps the schema's own. */
export const sayPlanFault: z.core.$ZodErrorMap = (issue) => {
  const unit = toUnit(issue.path ?? []);
  switch (issue.code) {
    case "invalid_type":
      return typeof issue.input === "number" ? "Enter a number, such as 1.5." : "Enter a number.";
    case "too_small":
      if (issue.origin !== "number") return undefined;
      return issue.inclusive === false
        ? `Must be more than ${toFigure(issue.minimum)}${unit}.`
        : `Must be ${toFigure(issue.minimum)}${unit} or more.`;
    case "too_big":
      if (issue.origin === "string") return `At most ${toFigure(issue.maximum)} characters.`;
      if (issue.origin !== "number") return undefined;
      return `Must be ${toFigure(issue.maximum)}${unit} or less.`;
    case "invalid_value":
    case "invalid_union":
      return "Choose one of the list.";
    default:
      return undefined;
  }
};
