/** `npm run lab -- ...`: makes labs from the terminal, whether the product runs or not. */
import { spawn } from "node:child_process";
import { bundlePath, ensureBundle, listBundles } from "../setup/bundles.mjs";
import { openDatabase, openInstallation, toProcessEnv } from "../setup/installation";
import { SetUpError } from "../setup/set-up-error";

export async function main(args: string[]): Promise<number> {
  const bundle = listBundles().find(({ name }) => name === "lab");
  if (bundle === undefined) throw new SetUpError("scripts/entries/lab.ts is missing.");
  await ensureBundle(bundle);
  const environment = openInstallation();
  const cluster = await openDatabase(environment);
  try {
    return await new Promise<number>((resolve, reject) => {
      const child = spawn(process.execPath, [bundlePath("lab"), ...args], {
        stdio: "inherit",
        env: toProcessEnv(environment),
      });
      child.once("error", reject);
      child.once("exit", (code) => resolve(code ?? 1));
    });
  } finally {
    if (cluster.started) await cluster.stop();
  }
}
