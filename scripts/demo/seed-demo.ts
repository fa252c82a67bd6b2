/** Fills an empty database with the demo labs, or goes on where that was interrupted. */
import type { Db } from "../../db/client";
import { listAllLabs } from "../../db/queries/labs";
import { hashPassword } from "../../lib/account/passwords";
import type { DemoLab, DemoSeries } from "./demo-labs";
import { publishDemoSeries } from "./publish-series";
import { ensureLab, type SeededLab } from "./seed-people";
import { ensureSeries, fillSeries, type SeedTools } from "./seed-series";
import { beginSeed, endSeed, isUnderWay } from "./seed-state";

/** Enough to keep recorders and workers busy, few enough that analyses begin early. */
const SERIES_AT_ONCE = 3;

export interface SeedPlan {
  tools: SeedTools;
  /** In the role of the owner. */
  owner: Db;
  dataDir: string;
  labs: readonly DemoLab[];
  say: (line: string) => void;
}

/** @returns whether everything stands; what failed is tried again at the next call. */
export async function seedDemo(plan: SeedPlan): Promise<boolean> {
  const { owner, tools, dataDir, labs, say } = plan;
  const goesOn = isUnderWay(dataDir);
  if (!goesOn && (await listAllLabs(owner)).length > 0) return true;
  const startedAt = Date.now();
  say(
    goesOn
      ? "Going on with the demo labs ..."
      : `Filling ${labs.length} demo labs from recordings of virtual loudspeakers, less than a minute ...`,
  );
  const passwordHash = await hashPassword(beginSeed(dataDir, labs));
  const planned: PlannedSeries[] = [];
  for (const lab of labs) {
    const seeded = await ensureLab({ owner, app: tools.app }, lab, passwordHash);
    for (const series of lab.series) {
      planned.push({ lab: seeded, id: await ensureSeries(tools, seeded, series), series });
    }
  }
  const faults = await fillAll(plan, planned);
  for (const fault of faults) say(`Not done: ${fault}`);
  if (faults.length > 0) return false;
  endSeed(dataDir);
  say(`The demo labs stand after ${Math.round((Date.now() - startedAt) / 1000)} s.`);
  return true;
}

interface PlannedSeries {
  lab: SeededLab;
  id: string;
  series: DemoSeries;
}

/** Some series at a time, in their order. @returns what went wrong, a sentence each */
async function fillAll(
  { tools, say }: SeedPlan,
  planned: readonly PlannedSeries[],
): Promise<string[]> {
  const faults: string[] = [];
  const waiting = [...planned];
  const work = async (): Promise<void> => {
    for (let next = waiting.shift(); next !== undefined; next = waiting.shift()) {
      const { lab, id, series } = next;
      const { maker, model, serial } = series.loudspeaker;
      try {
        const { state, recordings } = await fillSeries(tools, lab, id, series);
        const published =
          series.published !== null &&
          (await publishDemoSeries(tools.app, lab, id, series.published));
        say(
          `${maker} ${model} ${serial}: ${recordings} recordings, ${published ? "published" : state}`,
        );
      } catch (error) {
        faults.push(error instanceof Error ? error.message : String(error));
      }
    }
  };
  await Promise.all(Array.from({ length: SERIES_AT_ONCE }, work));
  return faults;
}
