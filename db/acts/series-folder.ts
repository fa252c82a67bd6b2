/** A series as the folder that the analysis command takes. */
import { AppError } from "../../lib/errors/app-error";
import type { PackFile } from "../../lib/evidence/pack-file";
import { toFileStem } from "../../lib/series/planned-runs";
import type { Trx } from "../client";
import { listAnalyses } from "../queries/analyses";
import { listRecordings } from "../queries/recordings";
import { toSeriesNumber } from "../queries/series";
import type { AnalysisInputs } from "../schema/analyses";
import { loadCapture } from "./capture";
import { toAnalysisInputs } from "./request-analysis";

export interface SeriesFolder {
  /** Name of the folder. */
  name: string;
  files: PackFile[];
  /** When its contents last changed. */
  at: Date;
}

/**
 * @param version of an analysis; null: what an analysis would be given now.
 * @throws AppError "not-found", "series.too-few-runs", "calibration.missing", "recording.removed"
 */
export async function loadSeriesFolder(
  trx: Trx,
  labId: string,
  seriesId: string,
  version: number | null,
): Promise<SeriesFolder> {
  const capture = await loadCapture(trx, labId, seriesId);
  const { series, loudspeaker } = capture;
  const name = `${toFileStem(loudspeaker.model)}_${toSeriesNumber(series.number)}`;
  if (version === null) {
    const inputs = toAnalysisInputs(capture);
    return { name, files: await toFolderFiles(trx, labId, inputs), at: series.changed_at };
  }
  const analyses = await listAnalyses(trx, labId, seriesId);
  const analysis = analyses.find((one) => one.version === version);
  if (analysis === undefined) {
    throw new AppError("not-found", `This series has no analysis version ${version}.`);
  }
  return {
    name: `${name}_v${version}`,
    files: await toFolderFiles(trx, labId, analysis.inputs),
    at: analysis.requested_at,
  };
}

/**
 * series.json and what it names, in its order.
 *
 * @throws AppError "recording.removed" where bytes were given up; "storage.missing" without a row
 */
export async function toFolderFiles(
  trx: Trx,
  labId: string,
  { series, files }: AnalysisInputs,
): Promise<PackFile[]> {
  const rows = await listRecordings(
    trx,
    labId,
    files.map(({ digest }) => digest),
  );
  const byDigest = new Map(rows.map((row) => [row.digest, row]));
  const recordings = files.map(({ file, digest }): PackFile => {
    const row = byDigest.get(digest);
    if (row === undefined) {
      throw new AppError("storage.missing", `The lab holds no recording for ${file}.`, { file });
    }
    requireKept({ file_name: file, removed_at: row.removed_at });
    return { name: file, digest, bytes: row.bytes };
  });
  return [{ name: "series.json", text: toSeriesText(series) }, ...recordings];
}

/** @throws AppError "recording.removed" */
export function requireKept(recording: { file_name: string; removed_at: Date | null }): void {
  const { file_name: file, removed_at: at } = recording;
  if (at === null) return;
  throw new AppError(
    "recording.removed",
    `${file} was removed for good on ${at.toISOString().slice(0, 10)}. Its results stay; its bytes are gone.`,
    { file },
  );
}

const toSeriesText = (series: unknown): string => `${JSON.stringify(series, null, 2)}\n`;
