/**
 * evidence.json: what stands in a folder beside series.json and its recordings, so that an outsider
 * can compute a published result again and hold it against what was published.
 */
import * as z from "zod";
import { timeSchema } from "../api/common";
import { criterionSchema } from "../series/series-schema";

const digest = z.string().regex(/^[0-9a-f]{64}$/);

export const EVIDENCE_FILE = "evidence.json";
export const RESULT_FILE = "result.json";
export const DECISIONS_FILE = "decisions.json";
export const SNAPSHOT_FILE = "publication.json";
export const README_FILE = "README.txt";
/** In the format that `sha256sum -c` reads; lists every file but itself. */
export const SUMS_FILE = "SHA256SUMS";

/** Names that a recording must not have: in an evidence pack they are ours. */
export const RESERVED_FILES: readonly string[] = [
  "series.json",
  EVIDENCE_FILE,
  RESULT_FILE,
  DECISIONS_FILE,
  SNAPSHOT_FILE,
  README_FILE,
  SUMS_FILE,
];

export const evidenceSchema = z.object({
  format: z.literal("tidemark-evidence-1"),
  publication: z.object({
    /** Path of the revision, "/t/withy-bench/osier-8a/2". */
    path: z.string(),
    lab: z.string(),
    series: z.string(),
    revision: z.number().int(),
    published_at: timeSchema,
    /** SHA-256 of publication.json. */
    digest,
  }),
  engine: z.object({
    name: z.literal("tidemark"),
    version: z.string(),
    /** Of the program that computed the result; null where it was not known. */
    source_commit: z.string().nullable(),
  }),
  analysis_version: z.number().int(),
  criterion: criterionSchema,
  /** SHA-256 of result.json: what the analysis command prints. */
  result_digest: digest,
  sign_off: z.object({
    by: z.string(),
    at: timeSchema,
    /** SHA-256 of decisions.json. */
    decisions_digest: digest,
    one_person: z.boolean(),
  }),
  /** What the analysis reads, series.json included. */
  inputs: z.array(z.object({ file: z.string(), bytes: z.number().int(), sha256: digest })),
});
export type Evidence = z.infer<typeof evidenceSchema>;
