/** A series that begins with the series.json of a folder: loudspeaker and plan in one transaction. */
import { AppError } from "../../lib/errors/app-error";
import {
  toLoudspeakerFacts,
  toPlannedFolder,
  type FolderUpload,
} from "../../lib/series/from-folder";
import { parseSeries } from "../../lib/series/parse-series";
import type { Series } from "../../lib/series/series-schema";
import type { Trx } from "../client";
import type { LabScope } from "../in-lab";
import { recordEvent } from "../queries/audit";
import { createLoudspeaker, getLoudspeaker } from "../queries/loudspeakers";
import { startSeries } from "./plan-series";

export interface ArrivedFolder {
  /** Of series.json. */
  text: string;
  loudspeakerId: string | null;
  /** A new one, where none of the lab is named. */
  loudspeaker: { maker: string; model: string; kind: string } | null;
  microphoneDigest: string | null;
}

/** @throws AppError "series.*", "calibration.missing", "plan.invalid", "not-found" */
export async function startFromFolder(
  trx: Trx,
  by: LabScope & { accountId: string },
  folder: ArrivedFolder,
): Promise<{ seriesId: string; uploads: FolderUpload[] }> {
  const series = parseSeries(folder.text);
  const loudspeakerId = folder.loudspeakerId ?? (await addLoudspeaker(trx, by, folder, series));
  const row = await getLoudspeaker(trx, by.labId, loudspeakerId);
  const { plan, uploads } = toPlannedFolder(series, {
    loudspeaker: { largestDimensionM: row.largest_dimension_m, tuningHz: row.tuning_hz },
    microphoneDigest: folder.microphoneDigest,
  });
  return { seriesId: await startSeries(trx, by, loudspeakerId, plan), uploads };
}

async function addLoudspeaker(
  trx: Trx,
  by: LabScope & { accountId: string },
  { loudspeaker }: ArrivedFolder,
  series: Series,
): Promise<string> {
  if (loudspeaker === null) throw new AppError("request.invalid", "Name a loudspeaker.");
  const { largestDimensionM, tuningHz } = toLoudspeakerFacts(series);
  const id = await createLoudspeaker(trx, by.labId, by.accountId, {
    ...loudspeaker,
    serial: "",
    largest_dimension_m: largestDimensionM,
    tuning_hz: tuningHz,
  });
  await recordEvent(trx, by, {
    act: "loudspeaker.created",
    subjectType: "loudspeaker",
    subjectId: id,
    details: { name: `${loudspeaker.maker} ${loudspeaker.model}` },
  });
  return id;
}
