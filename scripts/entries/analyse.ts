/**
 * The analysis command: folder in, JSON out (docs/contract.md). Exit 0: analysed; 2: the input is at
 * fault, said in one line of JSON; 1: our fault.
 */
import {
  accessSync,
  constants,
  readFileSync,
  realpathSync,
  renameSync,
  statSync,
  writeFileSync,
} from "node:fs";
import { availableParallelism } from "node:os";
import { basename, dirname, join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { parseArgs } from "node:util";
import { isMainThread } from "node:worker_threads";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { ENGINE_VERSION } from "../../lib/analysis/engine-version";
import type { OnProgress } from "../../lib/analysis/types";
import { checkInputs, checkResult, parseEvidence } from "../../lib/evidence/check-evidence";
import { EVIDENCE_FILE, type Evidence } from "../../lib/evidence/evidence-schema";
import { AppError } from "../../lib/errors/app-error";
import { toResultText } from "../../lib/result/result-text";
import { digestText } from "../../lib/review/digest-decisions";
import type { Result, Warning } from "../../lib/result/result-schema";
import { createFolderSource, readSeriesText } from "../../lib/series/folder-source";
import { listSeriesFiles } from "../../lib/series/list-series-files";
import { parseSeries } from "../../lib/series/parse-series";
import { relativeFileSchema, type Series } from "../../lib/series/series-schema";
import { digestFile } from "../../lib/storage/digest-file";
import { serveMeasuring, startMeasuringThread } from "../threads/measuring-thread";

const USAGE = "analyse <folder> [--out result.json]";
const INPUT_AT_FAULT = 2;

async function main(): Promise<void> {
  const { folder, out } = readArguments();
  if (!statSync(folder, { throwIfNoEntry: false })?.isDirectory()) {
    throw new AppError("series.file-missing", `There is no folder ${folder}.`);
  }
  const series = parseSeries(readSeriesText(folder));
  if (out !== undefined) checkOut(out, folder, series);
  const evidence = await readEvidence(folder);
  sayWarnings(evidence.warnings);
  const result = await analyseOnAllCores(series, folder);
  if (process.stderr.isTTY) process.stderr.write("\r\u001B[K");
  sayWarnings(result.warnings);
  const text = toResultText(result);
  if (evidence.evidence !== null) {
    sayWarnings(checkResult(evidence.evidence, digestText(text), evidence.warnings));
  }
  write(text, out);
}

/** A folder with evidence.json says what was published; what differs is a warning, never a refusal. */
async function readEvidence(
  folder: string,
): Promise<{ evidence: Evidence | null; warnings: Warning[] }> {
  const path = join(folder, EVIDENCE_FILE);
  if (!statSync(path, { throwIfNoEntry: false })?.isFile()) return { evidence: null, warnings: [] };
  const { evidence, warnings } = parseEvidence(readFileSync(path, "utf8"));
  if (evidence === null) return { evidence, warnings };
  const digests = new Map<string, string>();
  for (const { file } of evidence.inputs) {
    const isName = relativeFileSchema.safeParse(file).success;
    if (!isName || !statSync(join(folder, file), { throwIfNoEntry: false })?.isFile()) continue;
    digests.set(file, await digestFile(join(folder, file)));
  }
  return { evidence, warnings: checkInputs(evidence, ENGINE_VERSION, digests) };
}

/**
 * A second thread starts cold and compiles the engine once more: it is worth its while from some
 * twelve seconds at 96 kHz in each of four runs on.
 */
const WORTH_A_THREAD_BYTES = 16e6;

/** Another core measures half of long runs; the result is the same. */
async function analyseOnAllCores(series: Series, folder: string): Promise<Result> {
  const source = createFolderSource(folder);
  const progress = process.stderr.isTTY ? { onProgress: showProgress } : {};
  const sizes = series.runs.map(
    ({ file }) => statSync(join(folder, file), { throwIfNoEntry: false })?.size ?? 0,
  );
  const bytes = sizes.reduce((sum, size) => sum + size, 0);
  if (availableParallelism() < 2 || bytes < WORTH_A_THREAD_BYTES)
    return analyseSeries(series, source, progress);
  const thread = startMeasuringThread(fileURLToPath(import.meta.url));
  try {
    return await analyseSeries(series, source, { ...progress, helper: thread.helperFor(folder) });
  } finally {
    await thread.close();
  }
}

function readArguments(): { folder: string; out: string | undefined } {
  try {
    const { values, positionals } = parseArgs({
      options: { out: { type: "string" } },
      allowPositionals: true,
    });
    const [folder, ...more] = positionals;
    if (folder === undefined || more.length > 0)
      throw new Error(`one folder is needed, ${positionals.length} given`);
    return {
      folder: resolve(folder),
      out: values.out === undefined ? undefined : resolve(values.out),
    };
  } catch (error) {
    throw new AppError(
      "request.invalid",
      `${error instanceof Error ? error.message : String(error)}. Usage: ${USAGE}`,
    );
  }
}

const showProgress: OnProgress = ({ file, stage }) => {
  process.stderr.write(`\r\u001B[K${file === null ? "" : `${file}: `}${stage}`);
};

function sayWarnings(warnings: readonly Warning[]): void {
  for (const { code, message } of warnings) process.stderr.write(`warning ${code}: ${message}\n`);
}

/**
 * Seen before the work begins: a result has a place to go to, and it is none of the inputs.
 *
 * @throws AppError "request.invalid"
 */
function checkOut(out: string, folder: string, series: Series): void {
  const parent = dirname(out);
  if (!statSync(parent, { throwIfNoEntry: false })?.isDirectory()) {
    throw new AppError("request.invalid", `--out: there is no folder ${parent}. Make it first.`);
  }
  if (statSync(out, { throwIfNoEntry: false })?.isDirectory() === true) {
    throw new AppError("request.invalid", `--out: ${out} is a folder. Name a file in it.`);
  }
  try {
    accessSync(parent, constants.W_OK);
  } catch (error) {
    throw new AppError("request.invalid", `--out: nothing can be written to ${parent}.`, {
      cause: error,
    });
  }
  const place = join(realpathSync(parent), basename(out));
  const input = listSeriesFiles(series).find((file) => join(realpathSync(folder), file) === place);
  if (input !== undefined) {
    throw new AppError("request.invalid", `--out: ${out} is an input. Name another file.`, {
      file: input,
    });
  }
}

/** A file appears whole or not at all. */
function write(text: string, out: string | undefined): void {
  if (out === undefined) {
    process.stdout.write(text);
    return;
  }
  const draft = `${out}.${process.pid}.draft`;
  writeFileSync(draft, text);
  renameSync(draft, out);
}

function explain(error: unknown): void {
  if (error instanceof AppError && error.status < 500) {
    const { code, message, file, details } = error;
    const detail = Object.keys(details).length === 0 ? undefined : details;
    process.stderr.write(`${JSON.stringify({ code, message, file, detail })}\n`);
    process.exitCode = INPUT_AT_FAULT;
    return;
  }
  process.stderr.write(
    `${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`,
  );
  process.exitCode = 1;
}

if (isMainThread) {
  process.stdout.on("error", () => process.exit(1));
  main().catch(explain);
} else serveMeasuring();
