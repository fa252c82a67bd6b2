/**
 * A database cluster for one run of the tests: its own folder, its own port, gone at the end. A
 * folder that a killed run left behind is taken away by the next.
 */
import { existsSync, readdirSync } from "node:fs";
import { join } from "node:path";
import { createSecrets, type Secrets } from "../../lib/config/secrets";
import { ensureCluster, removeInstallation } from "../../scripts/setup/cluster";
import { ensureDatabase, ensureRoles } from "../../scripts/setup/database";
import { findFreePort } from "../../scripts/setup/ports";
import { migrate } from "../../scripts/setup/migrate";
import { cloneDir } from "../../scripts/setup/bootstrap.mjs";

/** What a test needs to reach the cluster; plain data, so that it travels to test processes. */
export interface TestCluster {
  databasePort: number;
  secrets: Secrets;
}

/** A database with every migration done, copied by each suite; nobody connects to it. */
export const TEMPLATE_DATABASE = "tidemark_template";

const testDir = join(cloneDir, ".tidemark", "test");

export interface RunningTestCluster extends TestCluster {
  stop: () => Promise<void>;
  /** Ends the server without waiting, and leaves its files. */
  endAtOnce: () => void;
}

export async function startTestCluster(): Promise<RunningTestCluster> {
  await removeLeftovers();
  const dataDir = join(testDir, `run-${process.pid}`);
  const access = {
    databasePort: await findFreePort(),
    databaseName: TEMPLATE_DATABASE,
    secrets: createSecrets(),
  };
  const cluster = await ensureCluster({
    dataDir,
    port: access.databasePort,
    superuserPassword: access.secrets.database.superuser,
    disposable: true,
  });
  const stop = (): Promise<void> => removeInstallation(dataDir);
  try {
    await ensureRoles(access);
    await ensureDatabase(access, TEMPLATE_DATABASE);
    await migrate(access);
  } catch (error) {
    await stop();
    throw error;
  }
  return {
    databasePort: access.databasePort,
    secrets: access.secrets,
    stop,
    endAtOnce: cluster.endAtOnce,
  };
}

async function removeLeftovers(): Promise<void> {
  const runs = existsSync(testDir) ? readdirSync(testDir) : [];
  for (const name of runs) {
    const pid = Number(/^run-(\d+)$/.exec(name)?.[1] ?? Number.NaN);
    if (Number.isNaN(pid) || existsSync(`/proc/${pid}`)) continue;
    await removeInstallation(join(testDir, name));
  }
}
