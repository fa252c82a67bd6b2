/** `npm run dev`: the product from its sources, restarted as they change. */
import { type Environment } from "../../lib/config/environment";
import { cloneDir } from "../setup/bootstrap.mjs";
import { hasEntry, toProcessEnv } from "../setup/installation";
import { packageFile } from "../setup/package-file";
import { serve } from "../setup/serve";
import { ensureSystemPackages, POSTGRESQL } from "../setup/system-packages";

const GRACE_MS = 10_000;

export function main(): Promise<number> {
  return serve({
    prepare: () => ensureSystemPackages([POSTGRESQL]),
    web: (environment) => ({
      name: "web",
      args: [
        packageFile("next/dist/bin/next"),
        "dev",
        "-H",
        environment.webHost,
        "-p",
        String(environment.webPort),
      ],
      env: toDevEnv(environment),
      cwd: cloneDir,
      graceMs: GRACE_MS,
    }),
    worker: (environment) =>
      hasEntry("workers/main.ts")
        ? {
            name: "worker",
            args: [packageFile("tsx/dist/cli.mjs"), "watch", "workers/main.ts"],
            env: toDevEnv(environment),
            cwd: cloneDir,
            graceMs: GRACE_MS,
          }
        : null,
    mailbox: ["--import", "tsx", "scripts/entries/mailbox.ts"],
    seed: hasEntry("scripts/entries/seed.ts")
      ? ["--import", "tsx", "scripts/entries/seed.ts"]
      : null,
    env: toDevEnv,
  });
}

function toDevEnv(environment: Environment): NodeJS.ProcessEnv {
  return { ...toProcessEnv(environment), NODE_ENV: "development" };
}
