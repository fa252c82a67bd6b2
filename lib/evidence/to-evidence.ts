/** The evidence pack of a publication: inputs, result and decisions, with the digests that bind them. */
import { AppError } from "../errors/app-error";
import { toRevisionPath } from "../publication/addresses";
import { parseSnapshotText } from "../publication/canonical";
import { toAnswer, toMethodWords, toPublishedNotice } from "../reader/page-words";
import { digestText } from "../review/digest-decisions";
import {
  DECISIONS_FILE,
  EVIDENCE_FILE,
  type Evidence,
  README_FILE,
  RESULT_FILE,
  SNAPSHOT_FILE,
  SUMS_FILE,
} from "./evidence-schema";
import type { PackFile } from "./pack-file";

export interface EvidenceFacts {
  /** The kept bytes of the publication. */
  snapshotText: string;
  /** series.json and every recording that it names. */
  inputs: readonly PackFile[];
  resultText: string;
  decisionsText: string;
  sourceCommit: string | null;
  /** Absolute address of the installation, without a slash at the end. */
  publicUrl: string;
  /** Name of the folder that the pack unpacks to. */
  folder: string;
}

/** @throws AppError "conflict.state" where result or decisions are not those that were published */
export function toEvidencePack(facts: EvidenceFacts): PackFile[] {
  const evidence = toEvidence(facts);
  const files: PackFile[] = [
    ...facts.inputs,
    { name: RESULT_FILE, text: facts.resultText },
    { name: DECISIONS_FILE, text: facts.decisionsText },
    { name: SNAPSHOT_FILE, text: facts.snapshotText },
    { name: EVIDENCE_FILE, text: `${JSON.stringify(evidence, null, 2)}\n` },
    { name: README_FILE, text: toReadme(facts, evidence) },
  ];
  return [...files, { name: SUMS_FILE, text: toSums(files) }];
}

function toEvidence(facts: EvidenceFacts): Evidence {
  const snapshot = parseSnapshotText(facts.snapshotText);
  const { analysis, sign_off, lab, series, revision } = snapshot;
  requireSame("result", digestText(facts.resultText), analysis.result_digest);
  requireSame("decisions", digestText(facts.decisionsText), sign_off.decisions_digest);
  return {
    format: "tidemark-evidence-1",
    publication: {
      path: toRevisionPath(lab.slug, series.slug, revision),
      lab: lab.name,
      series: series.number,
      revision,
      published_at: snapshot.published_at,
      digest: digestText(facts.snapshotText),
    },
    engine: {
      name: "tidemark",
      version: analysis.engine_version,
      source_commit: facts.sourceCommit,
    },
    analysis_version: analysis.version,
    criterion: snapshot.criterion,
    result_digest: analysis.result_digest,
    sign_off,
    inputs: facts.inputs.map((file) => ({
      file: file.name,
      bytes: bytesOf(file),
      sha256: digestOf(file),
    })),
  };
}

function requireSame(what: string, found: string, published: string): void {
  if (found === published) return;
  throw new AppError(
    "conflict.state",
    `The ${what} kept for this publication are not those that were published, so they prove nothing. Tell the lab.`,
    { details: { found, published } },
  );
}

export const digestOf = (file: PackFile): string =>
  "text" in file ? digestText(file.text) : file.digest;

const bytesOf = (file: PackFile): number =>
  "text" in file ? new TextEncoder().encode(file.text).length : file.bytes;

/** As `sha256sum` writes it, in the order of the names. */
export function toSums(files: readonly PackFile[]): string {
  return files
    .toSorted((a, b) => (a.name < b.name ? -1 : 1))
    .map((file) => `${digestOf(file)}  ${file.name}\n`)
    .join("");
}

function toReadme(facts: EvidenceFacts, { engine, publication, result_digest }: Evidence): string {
  const snapshot = parseSnapshotText(facts.snapshotText);
  const notice = toPublishedNotice(snapshot);
  const { maker, model } = snapshot.loudspeaker;
  const source =
    engine.source_commit === null
      ? "The commit of its source was not recorded."
      : `Commit of its source: ${engine.source_commit}`;
  return `${[
    `${maker} ${model}: the evidence behind ${facts.publicUrl}${publication.path}`,
    "",
    toAnswer(snapshot).join(" "),
    toMethodWords(snapshot),
    ...(notice === null ? [] : [`${notice.signal}: ${notice.lead} ${notice.text}`]),
    "",
    "Check this yourself",
    "",
    `1. Get Tidemark with engine ${engine.version}. ${source}`,
    "2. In its checkout, with this folder beside it, compute the result again:",
    "",
    `     npm run --silent analyse -- ../${facts.folder} --out ../again.json`,
    "",
    "3. The same engine gives the same bytes:",
    "",
    `     cmp ../again.json ../${facts.folder}/${RESULT_FILE}`,
    "",
    `   ${RESULT_FILE} has the SHA-256 ${result_digest}.`,
    "   Another engine says engine.differs; its figures may then differ, too.",
    "",
    "4. In this folder, every file against its digest:",
    "",
    `     sha256sum -c ${SUMS_FILE}`,
    "",
    "What is here",
    "",
    "  series.json       what was recorded and how; it names the recordings beside it",
    `  ${RESULT_FILE}       the result that was signed, as the command prints it`,
    `  ${DECISIONS_FILE}    what the analyst decided in each band, and why`,
    `  ${SNAPSHOT_FILE}  what was published; its SHA-256 is ${publication.digest}`,
    `  ${EVIDENCE_FILE}     engine, source, sign-off and the digests of all inputs`,
  ].join("\n")}\n`.replaceAll("\u00a0", " ");
}
