/**
 * A copy of this checkout as a clone would be, with packages and build beside it so that a test
 * does not wait for them. Starts in it are real: npm, supervisor, database, web server.
 */
import { execFileSync } from "node:child_process";
import { cpSync, existsSync, mkdirSync, readdirSync, rmSync } from "node:fs";
import { join } from "node:path";
import { cloneDir } from "../../scripts/setup/bootstrap.mjs";
import { removeInstallation } from "../../scripts/setup/cluster";
import { findFreePort } from "../../scripts/setup/ports";
import { ensureBuild, ensureBundles } from "../../scripts/setup/web-build";

export interface TestClone {
  dir: string;
  dataDir: string;
  webPort: number;
  databasePort: number;
  /** Settings for a start of its own, without the demo. */
  env: Record<string, string>;
  remove: () => Promise<void>;
}

const LEFT_OUT = new Set(["node_modules", ".next", "build", ".tidemark", ".git"]);

/**
 * @param name tells the copies of one run apart
 * @param build what must stand in it; the pages take far longer than the bundled programs
 */
export async function createTestClone(
  name: string,
  build: "everything" | "bundles",
): Promise<TestClone> {
  await (build === "everything" ? ensureBuild() : ensureBundles());
  const dir = join(cloneDir, ".tidemark", "test", `clone-${name}-${process.pid}`);
  rmSync(dir, { recursive: true, force: true });
  mkdirSync(dir, { recursive: true });
  execFileSync("cp", ["-al", join(cloneDir, "node_modules"), join(dir, "node_modules")]);
  const copy = (entry: string): void => {
    cpSync(join(cloneDir, entry), join(dir, entry), { recursive: true, preserveTimestamps: true });
  };
  for (const entry of listTop()) copy(entry);
  for (const entry of ["build", ".next"]) if (existsSync(join(cloneDir, entry))) copy(entry);
  const [webPort, databasePort] = [await findFreePort(), await findFreePort()];
  const dataDir = join(dir, ".tidemark");
  return {
    dir,
    dataDir,
    webPort,
    databasePort,
    env: {
      TIDEMARK_WEB_PORT: String(webPort),
      TIDEMARK_DB_PORT: String(databasePort),
      TIDEMARK_DATA_DIR: "",
      TIDEMARK_DEMO: "0",
    },
    remove: async () => {
      await removeInstallation(dataDir);
      rmSync(dir, { recursive: true, force: true });
    },
  };
}

function listTop(): string[] {
  return readdirSync(cloneDir).filter((entry) => !LEFT_OUT.has(entry));
}
