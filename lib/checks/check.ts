/** One number of ours beside a number that somebody else published, or that a closed form gives. */

export const SUBJECTS = {
  weighting: "Weighting",
  bands: "Bands",
  calibration: "Calibration",
  distance: "Level and distance",
  uncertainty: "Uncertainty",
  harmonics: "Distortion",
  sweep: "Sweep",
  "static-curves": "Compression",
  "coil-heating": "Voice-coil heating",
  programme: "Programme",
  exposure: "Hearing",
  "file-layouts": "Files",
} as const;
export type Subject = keyof typeof SUBJECTS;

export interface Check {
  /** "subject.what-it-is", unique. */
  id: string;
  subject: Subject;
  /** In words, as it stands in the table. */
  what: string;
  /** Our value, by the code of the product. */
  compute: () => number | Promise<number>;
  expected: number;
  /** The value may be off by so much, in the same unit; positive. */
  tolerance: number;
  /** "" for a plain number. */
  unit: string;
  /** Words, then how it is known in brackets: see lib/checks/sources.ts. */
  source: string;
  /** Rows of one published table share its name and are folded together. */
  table?: string;
  /** Numbers of the worked checks in docs/check-values.md section 14 that this row answers. */
  worked?: readonly number[];
}

export type CheckRow = Omit<Check, "id" | "subject">;

/** Gives each row its subject, and an id out of subject and name. */
export const toChecks = (subject: Subject, rows: Readonly<Record<string, CheckRow>>): Check[] =>
  Object.entries(rows).map(([name, row]) => ({ id: `${subject}.${name}`, subject, ...row }));

export interface CheckOutcome {
  check: Check;
  value: number;
  agrees: boolean;
}

/** A value that is no number does not agree. */
export const agrees = (value: number, expected: number, tolerance: number): boolean =>
  Math.abs(value - expected) <= tolerance;

/** @returns in the order of the checks */
export async function runChecks(checks: readonly Check[]): Promise<CheckOutcome[]> {
  const outcomes: CheckOutcome[] = [];
  for (const check of checks) {
    const value = await check.compute();
    outcomes.push({ check, value, agrees: agrees(value, check.expected, check.tolerance) });
  }
  return outcomes;
}
