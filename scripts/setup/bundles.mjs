// @ts-check
/**
 * The programs that run by Node alone, bundled from TypeScript into build/: the worker with its
 * analysis processes, and the commands under scripts/entries. A bundle is made anew when the
 * content of one of its sources, the lock file or this file has changed.
 */
import { createHash } from "node:crypto";
import {
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  writeFileSync,
} from "node:fs";
import { basename, join } from "node:path";
import { cloneDir } from "./bootstrap.mjs";

export const buildDir = join(cloneDir, "build");

/**
 * @typedef {{ name: string, entry: string, selfContained: boolean }} Bundle
 *   entry relative to the clone; selfContained: runs without node_modules
 */

/** @returns {Bundle[]} every bundle whose entry stands in the checkout */
export function listBundles() {
  const workers = listFiles("workers", /^main\.ts$|-process\.ts$/);
  const commands = listFiles("scripts/entries", /\.ts$/).filter(
    (file) => !file.endsWith(".test.ts"),
  );
  return [...workers, ...commands].map((entry) => {
    const name = entry === "workers/main.ts" ? "worker" : basename(entry, ".ts");
    return { name, entry, selfContained: name === "analyse" };
  });
}

/** @param {string} name */
export const bundlePath = (name) => join(buildDir, `${name}.mjs`);

/**
 * Makes a bundle where it is missing or stale.
 *
 * @param {Bundle} bundle
 * @returns {Promise<boolean>} whether it was made
 */
export async function ensureBundle(bundle) {
  if (isFresh(bundle)) return false;
  const { build, stop } = await import("esbuild");
  mkdirSync(buildDir, { recursive: true });
  const draft = `${bundlePath(bundle.name)}.${process.pid}.draft`;
  const result = await build({
    absWorkingDir: cloneDir,
    entryPoints: [bundle.entry],
    outfile: draft,
    bundle: true,
    platform: "node",
    target: "node20",
    format: "esm",
    packages: bundle.selfContained ? "bundle" : "external",
    // What Node alone runs is read anew each time: it is kept short, names of functions stay.
    ...(bundle.selfContained
      ? { minifySyntax: true, minifyWhitespace: true }
      : { sourcemap: "inline", sourcesContent: false }),
    banner: {
      js: 'import { createRequire as __createRequire } from "node:module"; const require = __createRequire(import.meta.url);',
    },
    metafile: true,
    logLevel: "warning",
  });
  // Its helper process would stay as long as we do.
  await stop();
  const inputs = Object.keys(result.metafile.inputs).filter(
    (file) => !file.includes("node_modules/"),
  );
  const stamp = {
    base: hashBase(),
    inputs: Object.fromEntries(inputs.map((file) => [file, hashFile(file)])),
  };
  renameSync(draft, bundlePath(bundle.name));
  writeFileSync(stampPath(bundle), JSON.stringify(stamp));
  return true;
}

/** @param {Bundle} bundle */
function isFresh(bundle) {
  if (!existsSync(stampPath(bundle)) || !existsSync(bundlePath(bundle.name))) return false;
  /** @type {{ base: string, inputs: Record<string, string> }} */
  const stamp = JSON.parse(readFileSync(stampPath(bundle), "utf8"));
  return (
    stamp.base === hashBase() &&
    Object.entries(stamp.inputs).every(([file, hash]) => hashFile(file) === hash)
  );
}

/** What every bundle depends on: packages, compiler settings, and how bundles are made. */
function hashBase() {
  const files = ["package-lock.json", "tsconfig.json", "scripts/setup/bundles.mjs"];
  return files.map(hashFile).join(" ");
}

/** @param {Bundle} bundle */
const stampPath = (bundle) => join(buildDir, `${bundle.name}.stamp.json`);

/** @param {string} file relative to the clone */
export function hashFile(file) {
  const path = join(cloneDir, file);
  return existsSync(path) ? createHash("sha256").update(readFileSync(path)).digest("hex") : "";
}

/**
 * @param {string} folder
 * @param {RegExp} pattern
 */
function listFiles(folder, pattern) {
  const path = join(cloneDir, folder);
  if (!existsSync(path)) return [];
  return readdirSync(path)
    .filter((file) => pattern.test(file))
    .toSorted()
    .map((file) => `${folder}/${file}`);
}
