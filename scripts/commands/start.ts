/** `npm start`: everything from a fresh clone to a running product. */
import { bundlePath } from "../setup/bundles.mjs";
import { cloneDir } from "../setup/bootstrap.mjs";
import { hasEntry, toProcessEnv } from "../setup/installation";
import { packageFile } from "../setup/package-file";
import { serve } from "../setup/serve";
import { ensureSystemPackages, POSTGRESQL } from "../setup/system-packages";
import { ensureBuild } from "../setup/web-build";

/** An analysis that runs is finished; it takes seconds. */
const WORKER_GRACE_MS = 45_000;
const WEB_GRACE_MS = 15_000;

export function main(): Promise<number> {
  return serve({
    prepare: async (signal) => {
      await ensureSystemPackages([POSTGRESQL]);
      await ensureBuild(signal);
    },
    web: (environment) => ({
      name: "web",
      args: [
        packageFile("next/dist/bin/next"),
        "start",
        "-H",
        environment.webHost,
        "-p",
        String(environment.webPort),
      ],
      env: toProcessEnv(environment),
      cwd: cloneDir,
      graceMs: WEB_GRACE_MS,
    }),
    worker: (environment) =>
      hasEntry("workers/main.ts")
        ? {
            name: "worker",
            args: ["--enable-source-maps", bundlePath("worker")],
            env: toProcessEnv(environment),
            cwd: cloneDir,
            graceMs: WORKER_GRACE_MS,
          }
        : null,
    mailbox: [bundlePath("mailbox")],
    seed: hasEntry("scripts/entries/seed.ts") ? [bundlePath("seed")] : null,
    env: toProcessEnv,
  });
}
