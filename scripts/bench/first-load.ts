/** What a browser loads of script before the workspace runs, from the build's own lists. */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { runInNewContext } from "node:vm";
import { gzipSync } from "node:zlib";
import { z } from "zod";
import type { Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";

const WORKSPACE = "(lab)/series/[seriesId]/output-limit/page";
const buildFolder = join(cloneDir, ".next");

const mainSchema = z.object({ rootMainFiles: z.array(z.string()).min(1) });
const pageSchema = z.record(
  z.string(),
  z.object({ entryJSFiles: z.record(z.string(), z.array(z.string())) }),
);

/** Every file of the page, its layouts and their error pages, compressed one by one as they are sent. */
function measureFirstLoadKb(page: string): number {
  const main: unknown = JSON.parse(readFileSync(join(buildFolder, "build-manifest.json"), "utf8"));
  const script = readFileSync(
    join(buildFolder, "server/app", `${page}_client-reference-manifest.js`),
    "utf8",
  );
  const globals: Record<string, unknown> = {};
  globals.globalThis = globals;
  runInNewContext(script, globals);
  const [entry] = Object.values(pageSchema.parse(globals.__RSC_MANIFEST));
  const files = new Set([
    ...mainSchema.parse(main).rootMainFiles,
    ...Object.values(entry?.entryJSFiles ?? {}).flat(),
  ]);
  const bytes = [...files].map((file) => gzipSync(readFileSync(join(buildFolder, file))).length);
  return bytes.reduce((sum, size) => sum + size, 0) / 1000;
}

export const benches: Bench[] = [
  {
    key: "first_load.workspace_kb",
    name: "script that the workspace of a series loads first, gzipped",
    unit: "kB",
    runs: 1,
    run: () => Promise.resolve(measureFirstLoadKb(WORKSPACE)),
  },
];
