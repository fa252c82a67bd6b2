/** Programs that come from Debian. */
import { existsSync, readdirSync } from "node:fs";
import { delimiter, join } from "node:path";
import { mustRun } from "./run-command";
import { SetUpError } from "./set-up-error";

export interface SystemPackage {
  /** Name of the package in Debian. */
  debian: string;
  present: () => boolean;
}

/** Folder of PostgreSQL's server programs, newest version first; null where there are none. */
export function findPostgresBin(): string | null {
  const root = "/usr/lib/postgresql";
  const versions = existsSync(root) ? readdirSync(root) : [];
  const folders = versions
    .toSorted((a, b) => Number(b) - Number(a))
    .map((version) => join(root, version, "bin"));
  return [...folders, ...searchPath()].find(holdsServer) ?? null;
}

export const POSTGRESQL: SystemPackage = {
  debian: "postgresql",
  present: () => findPostgresBin() !== null,
};

/** A package whose program of the same name must stand on the search path. */
export const program = (name: string): SystemPackage => ({
  debian: name,
  present: () => searchPath().some((folder) => existsSync(join(folder, name))),
});

/** What the way of installing depends on. */
export interface Machine {
  isRoot: boolean;
  hasTerminal: boolean;
  has: (programName: string) => boolean;
  /** Runs a command to its end; throws where it fails. */
  run: (command: readonly string[]) => Promise<unknown>;
}

const thisMachine: Machine = {
  isRoot: process.getuid?.() === 0,
  hasTerminal: process.stdin.isTTY,
  has: (name) => program(name).present(),
  run: (command) => mustRun("env", command),
};

/**
 * Installs what is missing from Debian, as root or by sudo.
 *
 * @throws SetUpError in one sentence where neither is there, or Debian refuses
 */
export async function ensureSystemPackages(
  packages: readonly SystemPackage[],
  machine: Machine = thisMachine,
): Promise<void> {
  const missing = packages.filter((one) => !one.present()).map((one) => one.debian);
  if (missing.length === 0) return;
  const byHand = `apt-get install --no-install-recommends ${missing.join(" ")}`;
  if (!machine.has("apt-get")) {
    throw new SetUpError(
      `Missing: ${missing.join(", ")}. This system has no apt-get: install by its own means and run the command again.`,
    );
  }
  const prefix = await findRootPrefix(machine);
  if (prefix === null) {
    throw new SetUpError(
      `Missing: ${missing.join(", ")}. Installing needs root: run "${byHand}" as root once, then this command again.`,
    );
  }
  process.stderr.write(`Installing ${missing.join(", ")} from Debian ...\n`);
  try {
    await machine.run([...prefix, ...aptGet("update")]);
    await machine.run([
      ...prefix,
      ...aptGet("install", "--yes", "--no-install-recommends", ...missing),
    ]);
  } catch (error) {
    throw new SetUpError(
      `Debian could not install ${missing.join(", ")}: the lines below say why; run "${byHand}" as root, then this command again.\n` +
        (error instanceof Error ? error.message : String(error)),
    );
  }
  const still = packages.filter((one) => !one.present()).map((one) => one.debian);
  if (still.length > 0) {
    throw new SetUpError(
      `Debian installed ${still.join(", ")}, but its programs are not found on the search path.`,
    );
  }
}

async function findRootPrefix(machine: Machine): Promise<string[] | null> {
  if (machine.isRoot) return [];
  if (!machine.has("sudo")) return null;
  // With a terminal sudo may ask for the password; without one only a free pass will do.
  if (machine.hasTerminal) return ["sudo"];
  return machine.run(["sudo", "-n", "true"]).then(
    () => ["sudo", "-n"],
    () => null,
  );
}

const aptGet = (...args: string[]): string[] => [
  "env",
  "DEBIAN_FRONTEND=noninteractive",
  "apt-get",
  "--quiet",
  ...args,
];

function searchPath(): string[] {
  const folders = (process.env["PATH"] ?? "").split(delimiter);
  return [...folders, "/usr/local/bin", "/usr/bin", "/bin"].filter((folder) => folder !== "");
}

function holdsServer(folder: string): boolean {
  return ["initdb", "pg_ctl", "postgres"].every((name) => existsSync(join(folder, name)));
}
