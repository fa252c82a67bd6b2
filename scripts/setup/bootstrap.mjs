// @ts-check
/**
 * What must happen before any package can be used: the right Node and the packages themselves.
 * Plain JavaScript on purpose, and plain enough that an old Node reads it and says so.
 */
import { createHash } from "crypto";
import { spawn } from "child_process";
import { existsSync, readFileSync, writeFileSync } from "fs";
import { dirname, join } from "path";
import { fileURLToPath } from "url";

export const cloneDir = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

const STOP_SIGNALS = ["SIGINT", "SIGTERM", "SIGHUP"];

/** Oldest Node that every package takes. */
const NEEDED_MAJOR = 20;
const NEEDED_MINOR = 19;

/**
 * @param {string} version such as "20.20.2"
 * @returns {string | null} what is wrong, in one sentence with the remedy
 */
export function nodeProblem(version) {
  const numbers = version.split(".").map(Number);
  const major = numbers[0] || 0;
  const minor = numbers[1] || 0;
  if (major > NEEDED_MAJOR || (major === NEEDED_MAJOR && minor >= NEEDED_MINOR)) return null;
  return (
    "Tidemark needs Node " +
    NEEDED_MAJOR +
    "." +
    NEEDED_MINOR +
    " or newer and this is Node " +
    version +
    ": install Node 20 (https://nodejs.org) and run the command again."
  );
}

/**
 * Whether node_modules holds what the lock file asks for: what npm noted at its last install,
 * package by package. Packages for other machines (optional) may be missing.
 *
 * @param {string} lockText package-lock.json
 * @param {string} installedText node_modules/.package-lock.json
 */
export function matchesLock(lockText, installedText) {
  const wanted = readLockedPackages(lockText);
  const installed = readLockedPackages(installedText);
  wanted.delete("");
  for (const [name, locked] of wanted) {
    const found = installed.get(name);
    if (found === undefined ? !mayBeMissing(locked) : found.version !== locked.version)
      return false;
  }
  return [...installed.keys()].every((name) => wanted.has(name));
}

/**
 * @typedef {{ version: string, optional?: boolean, devOptional?: boolean }} LockedPackage
 * @param {string} text of a lock file
 */
function readLockedPackages(text) {
  /** @type {{ packages: Record<string, LockedPackage> }} */
  const lock = JSON.parse(text);
  return new Map(Object.entries(lock.packages));
}

/** @param {LockedPackage} locked */
const mayBeMissing = (locked) => locked.optional === true || locked.devOptional === true;

/** Installs the packages of the lock file where they are missing or others; says so on stderr. */
export async function ensurePackages() {
  const lockText = readFileSync(join(cloneDir, "package-lock.json"), "utf8");
  const stampPath = join(cloneDir, "node_modules", ".tidemark-lock");
  const stamp = createHash("sha256").update(lockText).digest("hex");
  if (readIfThere(stampPath) === stamp) return;
  const installed = readIfThere(join(cloneDir, "node_modules", ".package-lock.json"));
  if (installed === null || !matchesLock(lockText, installed)) {
    process.stderr.write("Installing packages (npm ci) ...\n");
    // Development packages too, whatever NODE_ENV says: the build needs them. No package of ours
    // needs its install script, and older npm would run them.
    await runNpm(["ci", "--ignore-scripts", "--include=dev", "--no-audit", "--no-fund"]);
  }
  writeFileSync(stampPath, stamp);
}

/**
 * Runs one of our TypeScript commands in this very process, so that signals reach it.
 *
 * @param {string} command file in scripts/commands without extension; exports main(args)
 * @param {boolean} serves whether it runs until it is asked to end, so that the wish is no failure;
 *   until it listens for the wish itself, there is nothing yet to end
 */
export async function run(command, serves = false) {
  try {
    await prepare();
    if (serves) STOP_SIGNALS.forEach((signal) => process.on(signal, () => process.exit(0)));
    const tsx = await import("tsx/esm/api");
    tsx.register();
    /** @type {{ main: (args: string[]) => Promise<number | void> }} */
    const { main } = await import("../commands/" + command + ".ts");
    process.exitCode = (await main(process.argv.slice(2))) || 0;
  } catch (error) {
    fail(error);
  }
}

/** Node and packages, for commands that need no more. */
export async function prepare() {
  const problem = nodeProblem(process.versions.node);
  if (problem !== null) {
    process.stderr.write(problem + "\n");
    process.exit(1);
  }
  process.chdir(cloneDir);
  await ensurePackages();
}

/**
 * One clear sentence for what people can mend, the whole trace for what they cannot.
 *
 * @param {unknown} error
 */
export function fail(error) {
  const known =
    error instanceof Error && (error.name === "SetUpError" || error.name === "AppError");
  const text = error instanceof Error ? (known ? error.message : error.stack) : String(error);
  process.stderr.write("\n" + text + "\n");
  process.exitCode = 1;
}

/** @param {string[]} args */
function runNpm(args) {
  const npm = process.env.npm_execpath;
  const [command, first] =
    npm !== undefined && /npm-cli\.c?js$/.test(npm) ? [process.execPath, [npm]] : ["npm", []];
  return new Promise((resolve, reject) => {
    const child = spawn(command, first.concat(args), { cwd: cloneDir, stdio: ["ignore", 2, 2] });
    /** @param {string} why */
    const refuse = (why) => {
      const error = new Error(
        "The packages could not be installed (npm " +
          args[0] +
          " " +
          why +
          "): the lines above say " +
          "why; check the connection to the package registry and run the command again.",
      );
      error.name = "SetUpError";
      reject(error);
    };
    const end = () => {
      // npm would go on to its end; a half-made folder is made anew at the next start.
      child.kill("SIGKILL");
      child.once("exit", () => process.exit(0));
    };
    STOP_SIGNALS.forEach((signal) => process.on(signal, end));
    child.once("exit", () => STOP_SIGNALS.forEach((signal) => process.off(signal, end)));
    child.on("error", (error) => refuse(error.message));
    child.on("exit", (code, signal) =>
      code === 0 ? resolve(undefined) : refuse("ended with " + (signal || code)),
    );
  });
}

/** @param {string} path */
function readIfThere(path) {
  return existsSync(path) ? readFileSync(path, "utf8") : null;
}
