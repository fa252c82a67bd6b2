/** Programs that come from Debian. */
import { existsSync, readdirSync } from "node:fs";
import { delimiter, join } from "node:path";
import { mustRun, runCommand } from "./run-command";
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

/**
 * Installs what is missing from Debian, as root or by sudo.
 *
 * @throws SetUpError in one sentence where neither is there, or Debian refuses
 */
export async function ensureSystemPackages(packages: readonly SystemPackage[]): Promise<void> {
  const missing = packages.filter((one) => !one.present()).map((one) => one.debian);
  if (missing.length === 0) return;
  const byHand = `apt-get install --no-install-recommends ${missing.join(" ")}`;
  if (!program("apt-get").present()) {
    throw new SetUpError(
      `Missing: ${missing.join(", ")}. This system has no apt-get: install by its own means and run the command again.`,
    );
  }
  const prefix = await findRootPrefix();
  if (prefix === null) {
    throw new SetUpError(
      `Missing: ${missing.join(", ")}. Installing needs root: run "${byHand}" as root once, then this command again.`,
    );
  }
  process.stderr.write(`Installing ${missing.join(", ")} from Debian ...\n`);
  try {
    await aptGet(prefix, ["update"]);
    await aptGet(prefix, ["install", "--yes", "--no-install-recommends", ...missing]);
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

async function findRootPrefix(): Promise<string[] | null> {
  if (process.getuid?.() === 0) return [];
  if (!program("sudo").present()) return null;
  // With a terminal sudo may ask for the password; without one only a free pass will do.
  if (process.stdin.isTTY) return ["sudo"];
  const { code } = await runCommand("sudo", ["-n", "true"]);
  return code === 0 ? ["sudo", "-n"] : null;
}

function aptGet(prefix: readonly string[], args: readonly string[]): Promise<string> {
  const command = ["env", "DEBIAN_FRONTEND=noninteractive", "apt-get", "--quiet", ...args];
  return mustRun("env", [...prefix, ...command]);
}

function searchPath(): string[] {
  const folders = (process.env["PATH"] ?? "").split(delimiter);
  return [...folders, "/usr/local/bin", "/usr/bin", "/bin"].filter((folder) => folder !== "");
}

function holdsServer(folder: string): boolean {
  return ["initdb", "pg_ctl", "postgres"].every((name) => existsSync(join(folder, name)));
}
