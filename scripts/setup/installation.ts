/** An installation: its settings, its database and the processes that serve it. */
import { existsSync } from "node:fs";
import { availableParallelism } from "node:os";
import { join } from "node:path";
import { type Environment, readDataDir, readEnvironment } from "../../lib/config/environment";
import { ensureSecrets, readText } from "../../lib/config/secrets";
import { cloneDir } from "./bootstrap.mjs";
import {
  type Cluster,
  type ClusterOptions,
  ensureCluster,
  resetSuperuserPassword,
  stopCluster,
} from "./cluster";
import { ensureDatabase, ensureRoles, superuserCanSignIn } from "./database";
import { takeLock } from "./lock";
import { migrate } from "./migrate";
import { SetUpError } from "./set-up-error";
import { ensureSystemPackages, POSTGRESQL } from "./system-packages";

/** Settings of this clone; secrets are made where there are none. */
export function openInstallation(): Environment {
  const { made } = ensureSecrets(readDataDir(process.env, cloneDir));
  const environment = readEnvironment(process.env, {
    cloneDir,
    processors: availableParallelism(),
    readText,
  });
  if (made) process.stderr.write(`Made new secrets in ${environment.dataDir}/secrets.json.\n`);
  return environment;
}

/**
 * Only one supervisor may serve a data folder.
 *
 * @returns gives the folder back
 */
export function holdInstallation(environment: Environment): () => void {
  const release = takeLock(join(environment.dataDir, "supervisor.json"));
  if (typeof release === "function") return release;
  throw new SetUpError(
    `Tidemark runs from ${environment.dataDir} already (process ${release}): stop that one first, or give this one its own TIDEMARK_DATA_DIR, TIDEMARK_WEB_PORT and TIDEMARK_DB_PORT.`,
  );
}

/** The database, installed, running, with roles and every migration done. */
export async function openDatabase(environment: Environment): Promise<Cluster> {
  await ensureSystemPackages([POSTGRESQL]);
  const options: ClusterOptions = {
    dataDir: environment.dataDir,
    port: environment.databasePort,
    superuserPassword: environment.secrets.database.superuser,
  };
  let cluster = await ensureCluster(options);
  try {
    if (!(await superuserCanSignIn(environment))) {
      // The secrets were made anew over a cluster that knows the old ones.
      await stopCluster(cluster.place);
      await resetSuperuserPassword(options);
      cluster = await ensureCluster(options);
    }
    await ensureRoles(environment);
    await ensureDatabase(environment, environment.databaseName);
    await migrate(environment);
  } catch (error) {
    if (cluster.started) await cluster.stop();
    throw error;
  }
  return cluster;
}

/** Variables for a process that serves this installation. */
export function toProcessEnv(environment: Environment): NodeJS.ProcessEnv {
  return {
    ...process.env,
    NODE_ENV: "production",
    NEXT_TELEMETRY_DISABLED: "1",
    NEXTAUTH_URL: environment.publicUrl,
    TIDEMARK_DATA_DIR: environment.dataDir,
    TIDEMARK_SMTP_URL: environment.smtpUrl ?? "",
    TIDEMARK_MAILBOX_URL: environment.mailboxUrl ?? "",
  };
}

/** Whether a program of the product stands in this checkout. */
export const hasEntry = (file: string): boolean => existsSync(join(cloneDir, file));
