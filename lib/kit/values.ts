/** All values of a publication as CSV and JSON, with what must go with them. */
import { z } from "zod";
import type { Snapshot } from "../publication/snapshot-schema";
import { snapshotSchema } from "../publication/snapshot-schema";
import {
  toAnswer,
  toLimitWords,
  toMethodWords,
  toPublishedNotice,
  toSplUncertaintyWords,
} from "../reader/page-words";
import { parseCsv, toCsvLine } from "./csv";
import { toName, toSource } from "./kit-words";
import { toNoticeSentence } from "./notice-sentence";
import { toStandingSentence, type Standing } from "./standing";

export interface ValuesInput {
  snapshot: Snapshot;
  standing: Standing;
  /** SHA-256 of the snapshot's kept text. */
  digest: string;
  /** Absolute address of this revision's page. */
  page: string;
}

type Band = Snapshot["bands"][number];

const aboutSchema = z.object({
  format: z.literal("tidemark-values-1"),
  page: z.string(),
  digest: z.string(),
  state: z.string(),
  note: z.string().nullable(),
  loudspeaker: z.string(),
  answer: z.array(z.string()),
  method: z.string(),
  distance_m: z.number(),
  weighting: z.string(),
  criterion: z.string(),
  notice: z.object({ signal: z.string(), text: z.string() }).nullable(),
  uncertainty: z.string().nullable(),
  source: z.string(),
});
const valuesSchema = aboutSchema.extend({ publication: snapshotSchema });
export type Values = z.infer<typeof valuesSchema>;

/** Levels are stated for this distance, wherever the microphone stood. */
const STATED_AT_M = 1;

function toAbout({ snapshot, standing, digest, page }: ValuesInput): z.infer<typeof aboutSchema> {
  const notice = toPublishedNotice(snapshot);
  const plain = (text: string): string => text.replaceAll("\u00a0", " ");
  return {
    format: "tidemark-values-1",
    page,
    digest,
    state: standing.state,
    note: toStandingSentence(snapshot.revision, standing),
    loudspeaker: toName(snapshot),
    answer: toAnswer(snapshot).map(plain),
    method: plain(toMethodWords(snapshot)),
    distance_m: STATED_AT_M,
    weighting: "unweighted (Z)",
    criterion: plain(toLimitWords(snapshot.criterion)),
    notice:
      notice === null
        ? null
        : { signal: notice.signal, text: plain(`${notice.lead} ${notice.text}`) },
    uncertainty:
      snapshot.uncertainty_dB === null
        ? null
        : plain(
            `compression at most \u00b1${snapshot.uncertainty_dB} dB in any band; ${toSplUncertaintyWords(snapshot.bands)}; k = 2, one unit`,
          ),
    source: plain(toSource(snapshot, standing.timeZone)),
  };
}

/**
 * @param text the kept text of the snapshot: it stands in the file byte for byte, so that its
 *   SHA-256 is the digest beside it.
 */
export const toValuesJson = (input: ValuesInput, text: string): string =>
  `${JSON.stringify(toAbout(input)).slice(0, -1)},"publication":${text}}\n`;

/** The inverse. @throws ZodError */
export const parseValuesJson = (text: string): Values => valuesSchema.parse(JSON.parse(text));

type Kind = "number" | "number?" | "text" | "text?" | "word" | "flag";
/** "?": left out where empty; a word, a number or a flag is null where empty. */
type Field = readonly [path: string, kind: Kind];

const BAND_FIELDS: readonly Field[] = [
  ["nominal_Hz", "number"],
  ["exact_Hz", "number"],
  ["spl_uncertainty_dB", "number"],
  ["limit.status", "word"],
  ["limit.spl_dB", "number"],
  ["limit.nominal_dB", "number"],
  ["limit.low_dB", "number"],
  ["limit.high_dB", "number"],
  ["limit.bound_by", "word"],
  ["limit.reached", "flag"],
  ["limit.reason", "text?"],
  ["limit.kind", "word"],
  ["limit.criterion.thd_percent", "number?"],
  ["limit.criterion.compression_dB", "number?"],
  ["onset.status", "word"],
  ["onset.spl_dB", "number"],
  ["onset.nominal_dB", "number"],
  ["onset.low_dB", "number"],
  ["onset.high_dB", "number"],
  ["onset.ceiling_dB", "number"],
  ["onset.reason", "text?"],
  ["onset.control", "text?"],
  ["cause", "word"],
  ["cause_changed", "flag"],
  ["cause_reason", "text"],
];
const RUN_FIELDS: readonly Field[] = [
  ["spl_dB", "number"],
  ["expected_dB", "number"],
  ["compression_dB", "number"],
  ["uncertainty_dB", "number"],
  ["thd_percent", "number"],
  ["thd_quality", "word"],
  ["thd_orders", "text"],
];
const LONG_TERM_FIELDS: readonly Field[] = [
  ["total_dB", "number"],
  ["thermal_dB", "number"],
  ["uncertainty_dB", "number"],
  ["lower_bound", "flag"],
  ["cause", "word"],
];

/** "short-term 102 dB", and for a repeat "short-term 102 dB #2". */
type RunKey = string;

function keyRuns<T extends { level_dB: number }>(
  runs: readonly T[],
  kindOf: (run: T) => string,
): Map<RunKey, T> {
  const keyed = new Map<RunKey, T>();
  for (const run of runs) {
    const key = `${kindOf(run)} ${run.level_dB} dB`;
    let name = key;
    for (let count = 2; keyed.has(name); count += 1) name = `${key} #${count}`;
    keyed.set(name, run);
  }
  return keyed;
}

const keyLevels = (band: Band): Map<RunKey, Band["levels"][number]> =>
  keyRuns(band.levels, (run) => run.kind);
const keyLongTerm = (band: Band): Map<RunKey, Band["long_term"][number]> =>
  keyRuns(band.long_term, () => "loss after conditioning");

/** Comment lines first, then a head and one line per band. */
export function toValuesCsv(input: ValuesInput): string {
  const { bands } = input.snapshot;
  const runs = [...new Set(bands.flatMap((band) => [...keyLevels(band).keys()]))];
  const longTerm = [...new Set(bands.flatMap((band) => [...keyLongTerm(band).keys()]))];
  const fields = BAND_FIELDS.filter(([path]) => isKnown(bands, path));
  const head = [
    ...fields.map(([path]) => path),
    ...runs.flatMap((key) => RUN_FIELDS.map(([path]) => `${key}: ${path}`)),
    ...longTerm.flatMap((key) => LONG_TERM_FIELDS.map(([path]) => `${key}: ${path}`)),
  ];
  const lines = bands.map((band) => {
    const [levels, losses] = [keyLevels(band), keyLongTerm(band)];
    return [
      ...fields.map((field) => toText(band, field)),
      ...runs.flatMap((key) => RUN_FIELDS.map((field) => toText(levels.get(key), field))),
      ...longTerm.flatMap((key) => LONG_TERM_FIELDS.map((field) => toText(losses.get(key), field))),
    ];
  });
  return [
    ...toComments(input).map((line) => `# ${line.replaceAll(/\s+/g, " ")}`),
    toCsvLine(head),
    ...lines.map(toCsvLine),
    "",
  ].join("\r\n");
}

function toComments(input: ValuesInput): string[] {
  const about = toAbout(input);
  const notice = toPublishedNotice(input.snapshot);
  return [
    `${about.loudspeaker}, ${about.source}, revision ${input.snapshot.revision}, ${about.state}`,
    ...(about.note === null ? [] : [about.note]),
    about.answer.join(" "),
    about.method,
    input.snapshot.spl_valid
      ? `Levels: dB SPL at ${STATED_AT_M} m, ${about.weighting}; limit: ${about.criterion}`
      : `Levels: on the scale of the runs, because no absolute level holds in this space; limit: ${about.criterion}`,
    ...(notice === null ? [] : [toNoticeSentence(notice)]),
    ...(about.uncertainty === null ? [] : [`Uncertainty: ${about.uncertainty}`]),
    `${about.page} SHA-256 ${about.digest}`,
  ];
}

/** Older snapshots lack what was computed later: then there is no such column. */
const isKnown = (bands: readonly Band[], path: string): boolean =>
  path !== "spl_uncertainty_dB" || bands.some((band) => band.spl_uncertainty_dB !== undefined);

const EMPTY_TEXT = "none";

/** @returns "" where there is nothing: no such run, no value. */
function toText(from: object | undefined, [path, kind]: Field): string {
  if (from === undefined) return "";
  let value: unknown = from;
  for (const key of path.split(".")) value = (value as Record<string, unknown>)[key];
  if (typeof value === "string") return kind === "text" && value === "" ? EMPTY_TEXT : value;
  return typeof value === "number" || typeof value === "boolean" ? String(value) : "";
}

function readText(text: string, kind: Kind): unknown {
  if (text === "") return kind.endsWith("?") ? undefined : null;
  if (kind.startsWith("number")) return Number(text);
  if (kind === "flag") return text === "true";
  return kind === "text" && text === EMPTY_TEXT ? "" : text;
}

/**
 * The bands of a CSV of ours.
 * @throws ZodError where a value is missing or does not fit
 */
export function parseValuesCsv(text: string): Band[] {
  const [head = [], ...lines] = parseCsv(text.replaceAll(/^#.*\r?\n/gm, ""));
  return lines.map((cells) => {
    const at = new Map(head.map((name, index) => [name, cells[index] ?? ""]));
    const band: Record<string, unknown> = {};
    for (const [path, kind] of BAND_FIELDS) {
      const cell = at.get(path);
      if (cell !== undefined) put(band, path, readText(cell, kind));
    }
    return snapshotSchema.shape.bands.element.parse({
      ...band,
      levels: readRuns(at, RUN_FIELDS, /^(short-term|long-term|closing) /),
      long_term: readRuns(at, LONG_TERM_FIELDS, /^loss after conditioning /),
    });
  });
}

function readRuns(
  at: ReadonlyMap<string, string>,
  fields: readonly Field[],
  begins: RegExp,
): Record<string, unknown>[] {
  const keys = new Set([...at.keys()].filter((name) => begins.test(name)).map(toRunKey));
  return [...keys].flatMap((key) => {
    const cells = fields.map(
      ([path, kind]) => [path, at.get(`${key}: ${path}`) ?? "", kind] as const,
    );
    if (cells.every(([, cell]) => cell === "")) return [];
    const [, kind, level] = /^(.*?) (-?[\d.]+) dB/.exec(key) ?? [];
    const run: Record<string, unknown> = { level_dB: Number(level), kind };
    for (const [path, cell, type] of cells) put(run, path, readText(cell, type));
    return [run];
  });
}

const toRunKey = (name: string): RunKey => name.slice(0, name.indexOf(": "));

function put(into: Record<string, unknown>, path: string, value: unknown): void {
  const [key = "", ...rest] = path.split(".");
  if (rest.length === 0) {
    if (value !== undefined) into[key] = value;
    return;
  }
  const inner = (into[key] ?? {}) as Record<string, unknown>;
  into[key] = inner;
  put(inner, rest.join("."), value);
}
