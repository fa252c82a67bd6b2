/** Runs that come as tables: which files are tables, and which column holds what where a person says so. */
import * as z from "zod";

export const TABLE_EXTENSIONS = [".csv", ".tsv", ".txt", ".frd"] as const;

export const isTableName = (file: string): boolean =>
  TABLE_EXTENSIONS.some((extension) => file.toLowerCase().endsWith(extension));

export const HARMONIC_UNITS = ["dB SPL", "dB re fundamental", "percent"] as const;
export type HarmonicUnit = (typeof HARMONIC_UNITS)[number];

const MOST_COLUMNS = 100;
/** Counted from 1, as channels are. */
const column = z.number().int().min(1).max(MOST_COLUMNS);

const fields = z.strictObject({
  frequency: column,
  /** dB SPL at 1 m. */
  level: column,
  phase: column.optional(),
  /** THD in percent of the fundamental. */
  thd: column.optional(),
  harmonics: z
    .array(
      z.strictObject({
        order: z.number().int().min(2).max(9),
        column,
        unit: z.enum(HARMONIC_UNITS),
      }),
    )
    .max(8)
    .default([]),
  /** Frequencies stand in kHz. */
  kilohertz: z.boolean().default(false),
});
export type ColumnChoice = z.infer<typeof fields>;

/** Every column that the choice names, counted from 1. */
export const listColumns = ({
  frequency,
  level,
  phase,
  thd,
  harmonics,
}: ColumnChoice): number[] => [
  ...[frequency, level, phase, thd].filter((c) => c !== undefined),
  ...harmonics.map((h) => h.column),
];

const isUnique = (values: readonly number[]): boolean => new Set(values).size === values.length;

/** Columns mapped by hand, in place of those that the head of the table tells. */
export const columnChoiceSchema = fields
  .refine(({ harmonics }) => isUnique(harmonics.map(({ order }) => order)), {
    error: "must name each harmonic once",
    path: ["harmonics"],
  })
  .refine((choice) => isUnique(listColumns(choice)), {
    error: "must give each column one meaning",
  });
