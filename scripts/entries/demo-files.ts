/**
 * The recordings of a demo series as files, with series.json: to try the upload by hand, and the
 * analysis command. Everything its plan asks for, without the mishaps of the demo lab.
 */
import { existsSync, mkdirSync, readdirSync, writeFileSync } from "node:fs";
import { availableParallelism } from "node:os";
import { join, resolve } from "node:path";
import { parseArgs } from "node:util";
import { AppError } from "../../lib/errors/app-error";
import type { PlannedRun } from "../../lib/series/planned-runs";
import { toSeriesJson } from "../../lib/series/to-series-json";
import { DEMO_LABS, TO_BE_RECORDED, type DemoSeries } from "../demo/demo-labs";
import { recordSeries } from "../demo/record-series";
import { findRecordProgram, openRecorders } from "../demo/recorders";

const ALL = DEMO_LABS.flatMap((lab) => lab.series);
const USAGE = `Usage: npm run demo-files -- <folder> [--series ${TO_BE_RECORDED}]
Series: ${ALL.map(({ name }) => name).join(", ")}`;

async function main(): Promise<void> {
  const { folder, series } = readArguments();
  if (existsSync(folder) && readdirSync(folder).length > 0) {
    throw new AppError("request.invalid", `${folder} is not empty; name a new folder.`);
  }
  mkdirSync(folder, { recursive: true });
  const whole: DemoSeries = { ...series, recorded: "all", mishaps: {} };
  const files = recordSeries(whole).map(({ run }) => run);
  const recorders = openRecorders(
    findRecordProgram(import.meta.url),
    Math.min(files.length, availableParallelism()),
  );
  try {
    await Promise.all(
      files.map(({ slot, fileName }) =>
        recorders.record({ series: whole, slot, path: join(folder, fileName) }),
      ),
    );
  } finally {
    recorders.close();
  }
  writeFileSync(
    join(folder, "series.json"),
    `${JSON.stringify(toContract(whole, files), null, 2)}\n`,
  );
  const { maker, model, serial } = series.loudspeaker;
  process.stdout.write(
    `${files.length} recordings of ${maker} ${model} ${serial} and their series.json lie in ${folder}.\n`,
  );
}

function toContract({ loudspeaker, plan }: DemoSeries, files: readonly PlannedRun[]) {
  const { series } = toSeriesJson({
    loudspeaker: {
      maker: loudspeaker.maker,
      model: loudspeaker.model,
      largestDimensionM: loudspeaker.largest_dimension_m,
      tuningHz: loudspeaker.tuning_Hz,
    },
    plan,
    runs: files.map(({ role, levelDb, variant, fileName }) => ({
      id: fileName,
      role,
      levelDb,
      variant,
      file: fileName,
      digest: "",
      channel: 1,
    })),
  });
  return series;
}

function readArguments(): { folder: string; series: DemoSeries } {
  const { values, positionals } = parse();
  const [folder, ...more] = positionals;
  const series = ALL.find(({ name }) => name === values.series);
  if (folder === undefined || more.length > 0) {
    throw new AppError(
      "request.invalid",
      `One folder is needed, ${positionals.length} given.\n${USAGE}`,
    );
  }
  if (series === undefined) {
    throw new AppError("request.invalid", `There is no demo series ${values.series}.\n${USAGE}`);
  }
  return { folder: resolve(folder), series };
}

function parse() {
  try {
    return parseArgs({
      options: { series: { type: "string", default: TO_BE_RECORDED } },
      allowPositionals: true,
    });
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    throw new AppError("request.invalid", `${why}\n${USAGE}`, { cause: error });
  }
}

main().catch((error: unknown) => {
  process.stderr.write(`${error instanceof AppError ? error.message : String(error)}\n`);
  process.exitCode = 1;
});
