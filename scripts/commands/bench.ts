/**
 * `npm run bench -- [--json] [word ...]`: runs every bench whose key holds one of the words and
 * prints medians; with --json one object of keys to numbers on standard output, null where this
 * machine lacks what a bench needs.
 */
import { readdirSync } from "node:fs";
import { join } from "node:path";
import { median } from "simple-statistics";
import { z } from "zod";
import { type Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { SetUpError } from "../setup/set-up-error";
import { ensureSystemPackages, POSTGRESQL } from "../setup/system-packages";
import { ensureBuild } from "../setup/web-build";

const benchFileSchema = z.object({
  benches: z.array(z.custom<Bench>((value) => typeof value === "object" && value !== null)),
});

export async function main(args: string[]): Promise<number> {
  const json = args.includes("--json");
  const words = args.filter((arg) => arg !== "--json");
  const benches = (await loadBenches()).filter(
    ({ key }) => words.length === 0 || words.some((word) => key.includes(word)),
  );
  if (benches.length === 0) throw new SetUpError(`No bench is called ${words.join(" or ")}.`);
  await ensureSystemPackages([POSTGRESQL]);
  await ensureBuild();
  const medians: Record<string, number | null> = {};
  for (const bench of benches) {
    const missing = bench.missing?.() ?? null;
    if (missing !== null) {
      medians[bench.key] = null;
      process.stderr.write(`${bench.name}: left out, ${missing}\n`);
      continue;
    }
    const value = round(await measure(bench));
    medians[bench.key] = value;
    process.stderr.write(`${bench.name}: ${value} ${bench.unit} (median of ${bench.runs})\n`);
  }
  if (json) process.stdout.write(`${JSON.stringify(medians)}\n`);
  return 0;
}

async function loadBenches(): Promise<Bench[]> {
  const folder = join(cloneDir, "scripts/bench");
  const files = readdirSync(folder).filter((file) => file.endsWith(".ts"));
  const loaded = await Promise.all(
    files.toSorted().map(async (file) => {
      const loadedFile: unknown = await import(join(folder, file));
      return benchFileSchema.parse(loadedFile).benches;
    }),
  );
  return loaded.flat();
}

async function measure(bench: Bench): Promise<number> {
  const values: number[] = [];
  await bench.before?.();
  try {
    for (let run = 0; run < bench.runs; run += 1) values.push(await bench.run());
  } finally {
    await bench.after?.();
  }
  return median(values);
}

const round = (value: number): number => Number(value.toPrecision(4));
