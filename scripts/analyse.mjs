// @ts-check
/** Folder in, JSON out: bundles the command if it is stale, then runs it in this process. */
import { resolve } from "path";
import { pathToFileURL } from "url";
import { fail, prepare } from "./setup/bootstrap.mjs";

async function analyse() {
  // npm changes to the clone before it calls us; names are meant from where the caller stands.
  const callerDir = resolve(
    (process.env.npm_lifecycle_event === "analyse" && process.env.INIT_CWD) || process.cwd(),
  );
  await prepare();
  const { bundlePath, ensureBundle, listBundles } = await import("./setup/bundles.mjs");
  const bundle = listBundles().find((one) => one.name === "analyse");
  if (bundle === undefined) throw new Error("scripts/entries/analyse.ts is missing");
  await ensureBundle(bundle);
  process.chdir(callerDir);
  process.argv[1] = bundlePath("analyse");
  await import(pathToFileURL(bundlePath("analyse")).href);
}

analyse().catch(fail);
