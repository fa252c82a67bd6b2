/** After an engine update: published values that would change, and by how much. */
import { ENGINE_VERSION } from "../../lib/analysis/engine-version";
import { listPublishedChanges, type PublishedChange } from "../../lib/review/engine-changes";
import type { Trx } from "../client";
import { listAnalyses } from "../queries/analyses";
import { listLivePublications } from "../queries/live-publications";
import { getResult } from "../queries/results";
import { toSeriesNumber } from "../queries/series";

export interface EngineChanges {
  engine_version: string;
  series: {
    series_id: string;
    number: string;
    name: string;
    published_engine: string;
    changes: PublishedChange[] | null;
  }[];
}

/** Live publications of another engine than the present one, newest first. */
export async function loadEngineChanges(trx: Trx, labId: string): Promise<EngineChanges> {
  const series: EngineChanges["series"] = [];
  for (const { seriesId, number, name, snapshot } of await listLivePublications(trx, labId)) {
    const published = snapshot.analysis.engine_version;
    if (published === ENGINE_VERSION) continue;
    const done = (await listAnalyses(trx, labId, seriesId)).find(
      (one) => one.state === "done" && one.engine_version === ENGINE_VERSION,
    );
    series.push({
      series_id: seriesId,
      number: toSeriesNumber(number),
      name,
      published_engine: published,
      changes:
        done === undefined
          ? null
          : listPublishedChanges(snapshot, await getResult(trx, labId, done.id)),
    });
  }
  return { engine_version: ENGINE_VERSION, series };
}
