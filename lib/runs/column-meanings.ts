/** Which column of a table means what, as a person chooses it, and back to what is sent. */
import {
  columnChoiceSchema,
  HARMONIC_UNITS,
  type ColumnChoice,
  type HarmonicUnit,
} from "../series/table-columns";

/** "", "frequency", "frequency kHz", "level", "phase", "thd", "h3 percent". */
export type Meaning = string;

export const NO_MEANING: Meaning = "";
const ORDERS = [2, 3, 4, 5, 6, 7, 8, 9] as const;
const UNIT_WORDS: Record<HarmonicUnit, string> = {
  percent: "%",
  "dB re fundamental": "dB re fundamental",
  "dB SPL": "dB SPL",
};
const toHarmonic = (order: number, unit: HarmonicUnit): Meaning => `h${order} ${unit}`;

/** What may be chosen, with its words. */
export const MEANINGS: readonly { meaning: Meaning; words: string }[] = [
  { meaning: NO_MEANING, words: "leave out" },
  { meaning: "frequency", words: "frequency, Hz" },
  { meaning: "frequency kHz", words: "frequency, kHz" },
  { meaning: "level", words: "level, dB SPL" },
  { meaning: "phase", words: "phase, °" },
  { meaning: "thd", words: "THD, %" },
  ...ORDERS.flatMap((order) =>
    HARMONIC_UNITS.toReversed().map((unit) => ({
      meaning: toHarmonic(order, unit),
      words: `H${order}, ${UNIT_WORDS[unit]}`,
    })),
  ),
];

/** @returns [columns] the meaning of each; nothing chosen where there is no choice. */
export function toMeanings(choice: ColumnChoice | null, columns: number): Meaning[] {
  const meanings = Array.from({ length: columns }, () => NO_MEANING);
  const set = (column: number | undefined, meaning: Meaning): void => {
    if (column !== undefined) meanings[column - 1] = meaning;
  };
  if (choice === null) return meanings;
  set(choice.frequency, choice.kilohertz ? "frequency kHz" : "frequency");
  set(choice.level, "level");
  set(choice.phase, "phase");
  set(choice.thd, "thd");
  for (const { order, column, unit } of choice.harmonics) set(column, toHarmonic(order, unit));
  return meanings;
}

/** @returns what is sent, or what is still missing or twice there. */
export function toChoice(
  meanings: readonly Meaning[],
): { choice: ColumnChoice; fault: null } | { choice: null; fault: string } {
  const twice = MEANINGS.find(
    ({ meaning }) => meaning !== NO_MEANING && meanings.filter((m) => m === meaning).length > 1,
  );
  if (twice !== undefined) return refuse(`Two columns are “${twice.words}”. Leave one out.`);
  const find = (meaning: Meaning): number | undefined => {
    const at = meanings.indexOf(meaning);
    return at < 0 ? undefined : at + 1;
  };
  const kilohertz = find("frequency kHz");
  const frequency = find("frequency");
  if (kilohertz !== undefined && frequency !== undefined)
    return refuse("Two columns are the frequency. Leave one out.");
  if (kilohertz === undefined && frequency === undefined)
    return refuse("Say which column is the frequency.");
  if (find("level") === undefined) return refuse("Say which column is the level.");
  const parsed = columnChoiceSchema.safeParse({
    frequency: frequency ?? kilohertz,
    level: find("level"),
    phase: find("phase"),
    thd: find("thd"),
    harmonics: ORDERS.flatMap((order) =>
      HARMONIC_UNITS.flatMap((unit) => {
        const column = find(toHarmonic(order, unit));
        return column === undefined ? [] : [{ order, column, unit }];
      }),
    ),
    kilohertz: kilohertz !== undefined,
  });
  if (parsed.success) return { choice: parsed.data, fault: null };
  return refuse(`The columns do not fit: ${parsed.error.issues[0]?.message ?? "choose again"}.`);
}

const refuse = (fault: string): { choice: null; fault: string } => ({ choice: null, fault });
