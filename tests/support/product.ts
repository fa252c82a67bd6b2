/**
 * The built product over a suite's own database: web server and worker as they run in earnest.
 *
 *     product = await startTestProduct(database);
 *     await fetch(`${product.url}/api/health`);
 *     await product.stop();
 */
import { mkdirSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { secretsPath } from "../../lib/config/secrets";
import { cloneDir } from "../../scripts/setup/bootstrap.mjs";
import { bundlePath } from "../../scripts/setup/bundles.mjs";
import { packageFile } from "../../scripts/setup/package-file";
import { findFreePort } from "../../scripts/setup/ports";
import { supervise, type Supervised } from "../../scripts/setup/supervisor";
import { ensureBuild } from "../../scripts/setup/web-build";
import { type TestDatabase } from "./database";

export interface TestProduct {
  /** Address of the web server, without a slash at the end. */
  url: string;
  /** Holds recordings and uploads; gone after stop(). */
  dataDir: string;
  web: Supervised;
  worker: Supervised;
  /** Every line that web and worker printed. */
  output: () => string;
  stop: () => Promise<void>;
}

const READY_WITHIN_MS = 60_000;

/** @param env settings on top, such as TIDEMARK_MAX_UPLOAD_MB */
export async function startTestProduct(
  database: TestDatabase,
  env: Record<string, string> = {},
): Promise<TestProduct> {
  await ensureBuild();
  const dataDir = join(cloneDir, ".tidemark", "test", `data-${database.databaseName}`);
  mkdirSync(dataDir, { recursive: true, mode: 0o711 });
  writeFileSync(secretsPath(dataDir), JSON.stringify(database.secrets), { mode: 0o600 });
  const port = await findFreePort();
  const url = `http://127.0.0.1:${port}`;
  const settings = {
    ...process.env,
    NODE_ENV: "production" as const,
    NEXTAUTH_URL: url,
    TIDEMARK_DATA_DIR: dataDir,
    TIDEMARK_DB_PORT: String(database.databasePort),
    TIDEMARK_DB_NAME: database.databaseName,
    TIDEMARK_WEB_PORT: String(port),
    TIDEMARK_PUBLIC_URL: url,
    TIDEMARK_WORKER_PROCESSES: "1",
    ...env,
  };
  const lines: string[] = [];
  const start = (name: string, args: string[]): Supervised =>
    supervise(
      { name, args, env: settings, cwd: cloneDir, graceMs: 20_000, longestPauseMs: 500 },
      (line) => lines.push(line),
    );
  const web = start("web", [
    packageFile("next/dist/bin/next"),
    "start",
    "-H",
    "127.0.0.1",
    "-p",
    String(port),
  ]);
  const worker = start("worker", ["--enable-source-maps", bundlePath("worker")]);
  const stop = async (): Promise<void> => {
    await Promise.all([web.stop(), worker.stop()]);
    rmSync(dataDir, { recursive: true, force: true });
  };
  try {
    await waitUntilReady(url);
  } catch (error) {
    await stop();
    throw new Error(`The product did not start:\n${lines.join("\n")}`, { cause: error });
  }
  return { url, dataDir, web, worker, output: () => lines.join("\n"), stop };
}

async function waitUntilReady(url: string): Promise<void> {
  const until = Date.now() + READY_WITHIN_MS;
  for (;;) {
    try {
      await fetch(`${url}/api/health`);
      return;
    } catch (error) {
      if (Date.now() > until) throw error;
      await sleep(50);
    }
  }
}
