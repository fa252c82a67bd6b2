/** Everything that is built before it runs: the web server's pages and the bundled programs. */
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { readText } from "../../lib/config/secrets";
import { type Source, sourcePath } from "../../lib/config/source-commit";
import { cloneDir } from "./bootstrap.mjs";
import { buildDir, ensureBundle, hashFile, listBundles } from "./bundles.mjs";
import { takeLock } from "./lock";
import { mustRun, runCommand } from "./run-command";
import { SetUpError } from "./set-up-error";

const SOURCE_FOLDERS = ["app", "components", "lib", "db", "public"];
const SOURCE_FILES = [
  "instrumentation.ts",
  "next.config.mjs",
  "package-lock.json",
  "postcss.config.mjs",
  "proxy.ts",
  "tsconfig.json",
];

/**
 * Builds what is stale; by content, so that a fresh clone of the same commit and a touched file
 * tell no lies. Two processes at once build once.
 *
 * @param signal ends the build early
 * @throws SetUpError with the compiler's last lines
 */
export function ensureBuild(signal?: AbortSignal): Promise<void> {
  return withLock(signal, async () => {
    await noteSource();
    await bundleAll();
    await ensureWebBuild(signal);
  });
}

/** The bundled programs alone, as ensureBuild makes them. */
export const ensureBundles = (): Promise<void> => withLock(undefined, bundleAll);

/** What the programs were built from, for the evidence that they leave. */
async function noteSource(): Promise<void> {
  const git = (...args: string[]) =>
    runCommand("git", ["-C", cloneDir, ...args]).catch(() => ({ code: 1, stdout: "" }));
  const head = await git("rev-parse", "HEAD");
  const status = head.code === 0 ? await git("status", "--porcelain") : head;
  const source: Source =
    head.code === 0 && status.code === 0
      ? { commit: head.stdout.trim(), changed: status.stdout.trim() !== "" }
      : { commit: null, changed: false };
  writeFileSync(sourcePath(cloneDir), JSON.stringify(source));
}

async function bundleAll(): Promise<void> {
  for (const bundle of listBundles()) {
    if (await ensureBundle(bundle)) process.stderr.write(`Built ${bundle.name}.\n`);
  }
}

async function ensureWebBuild(signal: AbortSignal | undefined): Promise<void> {
  const stampPath = join(buildDir, "web.stamp.json");
  const sources = hashSources();
  if (readText(stampPath) === toStamp(sources)) return;
  process.stderr.write("Building the web server ...\n");
  const startedAt = Date.now();
  try {
    await mustRun(process.execPath, [join(cloneDir, "node_modules/next/dist/bin/next"), "build"], {
      cwd: cloneDir,
      env: { ...process.env, NODE_ENV: "production", NEXT_TELEMETRY_DISABLED: "1" },
      ...(signal === undefined ? {} : { signal }),
    });
  } catch (error) {
    if (signal?.aborted === true) throw error;
    throw new SetUpError(
      `The web server could not be built.\n${error instanceof Error ? error.message : String(error)}`,
    );
  }
  writeFileSync(stampPath, toStamp(sources));
  process.stderr.write(
    `Built the web server in ${Math.round((Date.now() - startedAt) / 1000)} s.\n`,
  );
}

/** Names the sources and the very build made from them. */
function toStamp(sources: string): string {
  return JSON.stringify({ sources, build: readText(join(cloneDir, ".next", "BUILD_ID")) });
}

function hashSources(): string {
  const hash = createHash("sha256");
  const files = [...SOURCE_FILES, ...SOURCE_FOLDERS.flatMap(listFiles)];
  for (const file of files.toSorted()) hash.update(`${file} ${hashFile(file)}\n`);
  return hash.digest("hex");
}

function listFiles(folder: string): string[] {
  if (!existsSync(join(cloneDir, folder))) return [];
  return readdirSync(join(cloneDir, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !/\.test\.tsx?$/.test(entry.name))
    .map((entry) => join(entry.parentPath, entry.name).slice(cloneDir.length + 1));
}

async function withLock(
  signal: AbortSignal | undefined,
  build: () => Promise<void>,
): Promise<void> {
  mkdirSync(buildDir, { recursive: true });
  let release = takeLock(join(buildDir, "lock"));
  while (typeof release !== "function") {
    await sleep(200, undefined, signal === undefined ? {} : { signal });
    release = takeLock(join(buildDir, "lock"));
  }
  try {
    await build();
  } finally {
    release();
  }
}
