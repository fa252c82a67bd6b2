// @ts-check
/** Runs a bundled command in this very process, from where its caller stands. */
import { resolve } from "path";
import { pathToFileURL } from "url";
import { prepare } from "./bootstrap.mjs";

/**
 * @param {string} name of the command: its npm script and its file in scripts/entries
 * @param {string[]} beside further bundles that it starts
 */
export async function runBundle(name, beside = []) {
  // npm changes to the clone before it calls us; names are meant from where the caller stands.
  const callerDir = resolve(
    (process.env.npm_lifecycle_event === name && process.env.INIT_CWD) || process.cwd(),
  );
  await prepare();
  const { bundlePath, ensureBundle, listBundles } = await import("./bundles.mjs");
  for (const wanted of [name, ...beside]) {
    const bundle = listBundles().find((one) => one.name === wanted);
    if (bundle === undefined) throw new Error(`scripts/entries/${wanted}.ts is missing`);
    await ensureBundle(bundle);
  }
  process.chdir(callerDir);
  process.argv[1] = bundlePath(name);
  await import(pathToFileURL(bundlePath(name)).href);
}
