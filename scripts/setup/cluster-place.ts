/** Where the database's files lie and as which user its programs run. */
import { createHash } from "node:crypto";
import { chownSync, existsSync, mkdirSync, readFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { cloneDir } from "./bootstrap.mjs";
import { runCommand } from "./run-command";
import { SetUpError } from "./set-up-error";

export interface ClusterPlace {
  /** Folder of ours: the cluster's `data`, its log. Owned by `user`. */
  folder: string;
  /** Whether the clone could not be used because the database's user cannot reach it. */
  outsideClone: boolean;
  /** Command prefix that runs a program as the owner of the files. */
  asOwner: readonly string[];
  /** Ids of the owner; null: our own. */
  owner: { uid: number; gid: number } | null;
}

/**
 * As root the server runs as Debian's user `postgres` (it refuses root); as anybody else it runs
 * as ourselves.
 *
 * @param dataDir absolute; made where missing
 * @throws SetUpError where root has no user `postgres`
 */
export async function findClusterPlace(dataDir: string): Promise<ClusterPlace> {
  mkdirSync(dataDir, { recursive: true, mode: 0o711 });
  const inside = join(dataDir, "postgres");
  if (process.getuid?.() !== 0) {
    mkdirSync(inside, { recursive: true, mode: 0o700 });
    return { folder: inside, outsideClone: false, asOwner: [], owner: null };
  }
  const owner = readUser("postgres");
  if (owner === null) {
    throw new SetUpError(
      'The user "postgres" is missing, and PostgreSQL does not run as root: install Debian\'s postgresql, or run this command as an ordinary user.',
    );
  }
  const asOwner = [
    "setpriv",
    `--reuid=${owner.uid}`,
    `--regid=${owner.gid}`,
    "--clear-groups",
    "--",
  ];
  const reachable = await canEnter(asOwner, dataDir);
  const folder = reachable ? inside : join("/var/lib/tidemark", outsideName(dataDir));
  mkdirSync(folder, { recursive: true, mode: 0o711 });
  chownSync(folder, owner.uid, owner.gid);
  if (!(await canEnter(asOwner, folder))) {
    throw new SetUpError(
      `The user "postgres" cannot reach ${folder}: make its parent folders passable (chmod a+x).`,
    );
  }
  return { folder, outsideClone: !reachable, asOwner, owner };
}

/** A name for the clone, and for the data folder where it is not the usual one. */
function outsideName(dataDir: string): string {
  const clone = shortHash(cloneDir);
  return dataDir === join(cloneDir, ".tidemark") ? clone : `${clone}-${shortHash(dataDir)}`;
}

const shortHash = (text: string): string =>
  createHash("sha256").update(text).digest("hex").slice(0, 12);

/** Tried, not reasoned: access rights have more rules than the mode bits show. */
async function canEnter(asOwner: readonly string[], folder: string): Promise<boolean> {
  const target = existsSync(folder) ? folder : dirname(folder);
  return (await runCommand("env", [...asOwner, "test", "-x", target], { cwd: "/" })).code === 0;
}

function readUser(name: string): { uid: number; gid: number } | null {
  const line = readFileSync("/etc/passwd", "utf8")
    .split("\n")
    .find((entry) => entry.startsWith(`${name}:`));
  const [, , uid, gid] = line?.split(":") ?? [];
  return uid === undefined || gid === undefined ? null : { uid: Number(uid), gid: Number(gid) };
}
