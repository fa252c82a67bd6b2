/**
 * A PostgreSQL cluster of our own: made, started, adopted and stopped by us alone. It listens on
 * loopback only, has no socket file, and every role signs in by SCRAM.
 */
import {
  chownSync,
  existsSync,
  readdirSync,
  readFileSync,
  readlinkSync,
  realpathSync,
  renameSync,
  rmSync,
  writeFileSync,
} from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { readText } from "../../lib/config/secrets";
import { type ClusterPlace, findClusterPlace } from "./cluster-place";
import { assertPortFree } from "./ports";
import { mustRun } from "./run-command";
import { SetUpError } from "./set-up-error";
import { findPostgresBin } from "./system-packages";

export interface ClusterOptions {
  /** Absolute folder of this installation. */
  dataDir: string;
  port: number;
  superuserPassword: string;
  /** For tests: quicker, and a power cut may lose everything. */
  disposable?: boolean;
}

export interface Cluster {
  place: ClusterPlace;
  port: number;
  /** Whether this call started the server; false: it ran already. */
  started: boolean;
  isRunning: () => boolean;
  /** Ends the server, whoever uses it. */
  stop: () => Promise<void>;
  /** Ends the server without waiting for anything; it recovers at its next start. */
  endAtOnce: () => void;
}

const START_ATTEMPTS = 20;
const START_PAUSE_MS = 500;

/**
 * The cluster of a data folder, running: made if missing, started if stopped, adopted if it runs
 * on the wanted port.
 *
 * @throws SetUpError where the port belongs to a stranger or the server refuses to start
 */
export async function ensureCluster(options: ClusterOptions): Promise<Cluster> {
  const bin = findPostgresBin();
  if (bin === null) throw new SetUpError("PostgreSQL's server programs are not installed.");
  const place = await findClusterPlace(options.dataDir);
  const data = join(place.folder, "data");
  const control = (...args: string[]) => asOwner(place, join(bin, "pg_ctl"), [...args, "-D", data]);
  const handle = {
    place,
    port: options.port,
    isRunning: () => findServerPid(data) !== null,
    stop: () => stopCluster(place),
    endAtOnce: () => {
      const pid = findServerPid(data);
      if (pid !== null) process.kill(pid, "SIGQUIT");
    },
  };
  const running = findServerPid(data);
  if (running !== null && readServerPort(data) === options.port) {
    return { ...handle, started: false };
  }
  await stopCluster(place);
  await assertPortFree(options.port, "127.0.0.1", "TIDEMARK_DB_PORT");
  if (!existsSync(join(data, "PG_VERSION"))) await initialise(bin, place, data, options);
  await startServer(control, place, data, options);
  return { ...handle, started: true };
}

/** Ends the server of a place, whoever uses it; nothing happens where none runs. */
export async function stopCluster(place: ClusterPlace): Promise<void> {
  const data = join(place.folder, "data");
  const bin = findPostgresBin();
  if (bin === null || findServerPid(data) === null) return;
  await asOwner(place, join(bin, "pg_ctl"), ["stop", "-D", data, "-w", "-t", "60", "-m", "fast"]);
}

/** Takes a data folder away for good, and the cluster of its own wherever that lies. */
export async function removeInstallation(dataDir: string): Promise<void> {
  const place = await findClusterPlace(dataDir);
  await stopCluster(place);
  rmSync(place.folder, { recursive: true, force: true });
  rmSync(dataDir, { recursive: true, force: true });
}

/**
 * Sets the superuser's password without knowing the old one, for secrets that were made anew.
 * The server must not run.
 */
export async function resetSuperuserPassword(options: ClusterOptions): Promise<void> {
  const bin = findPostgresBin();
  const place = await findClusterPlace(options.dataDir);
  const data = join(place.folder, "data");
  if (bin === null || !existsSync(join(data, "PG_VERSION")) || findServerPid(data) !== null) return;
  const script = join(place.folder, "password.sql");
  writeOwned(
    place,
    script,
    `alter role tidemark_superuser password '${options.superuserPassword}'\n`,
  );
  try {
    await asOwner(place, "sh", [
      "-c",
      '"$0" --single -D "$1" postgres <"$2"',
      join(bin, "postgres"),
      data,
      script,
    ]);
  } finally {
    rmSync(script, { force: true });
  }
}

async function initialise(
  bin: string,
  place: ClusterPlace,
  data: string,
  options: ClusterOptions,
): Promise<void> {
  for (const name of readdirSync(place.folder).filter((entry) => entry.startsWith("data.new"))) {
    rmSync(join(place.folder, name), { recursive: true, force: true });
  }
  const draft = `${data}.new-${process.pid}`;
  const passwordFile = join(place.folder, `password-${process.pid}`);
  writeOwned(place, passwordFile, options.superuserPassword);
  try {
    await asOwner(place, join(bin, "initdb"), [
      `--pgdata=${draft}`,
      "--username=tidemark_superuser",
      "--auth=scram-sha-256",
      `--pwfile=${passwordFile}`,
      "--encoding=UTF8",
      "--locale=C.UTF-8",
      ...(options.disposable === true ? ["--no-sync"] : []),
    ]);
  } finally {
    rmSync(passwordFile, { force: true });
  }
  renameSync(draft, data);
}

async function startServer(
  control: (...args: string[]) => Promise<string>,
  place: ClusterPlace,
  data: string,
  options: ClusterOptions,
): Promise<void> {
  const log = join(place.folder, "server.log");
  const settings = [
    `-p ${options.port}`,
    "-c listen_addresses=127.0.0.1",
    "-c unix_socket_directories=''",
    "-c password_encryption=scram-sha-256",
    "-c max_connections=120",
    ...(options.disposable === true
      ? ["-c fsync=off", "-c synchronous_commit=off", "-c full_page_writes=off"]
      : []),
  ].join(" ");
  for (let attempt = 1; ; attempt += 1) {
    dropStalePidFile(data);
    const { code } = await control("start", "-w", "-t", "60", "-l", log, "-o", settings)
      .then(() => ({ code: 0 }))
      .catch(() => ({ code: 1 }));
    if (code === 0) return;
    const tail = (readText(log) ?? "").trim().split("\n").slice(-8).join("\n");
    // After a kill -9 of the server its children hold shared memory for a moment longer.
    const passing = /shared memory block|lock file "postmaster.pid" already exists/.test(tail);
    if (!passing || attempt >= START_ATTEMPTS) {
      throw new SetUpError(`PostgreSQL did not start; the last lines of ${log}:\n${tail}`);
    }
    await sleep(START_PAUSE_MS);
  }
}

/** Process id of the server of these files, or null; a number that was given to others is not it. */
function findServerPid(data: string): number | null {
  const pid = Number(readText(join(data, "postmaster.pid"))?.split("\n")[0] ?? Number.NaN);
  if (!Number.isInteger(pid)) return null;
  try {
    return realpathSync(readlinkSync(`/proc/${pid}/cwd`)) === realpathSync(data) ? pid : null;
  } catch {
    return null;
  }
}

function dropStalePidFile(data: string): void {
  const path = join(data, "postmaster.pid");
  if (existsSync(path) && findServerPid(data) === null) rmSync(path, { force: true });
}

function readServerPort(data: string): number {
  return Number(readFileSync(join(data, "postmaster.pid"), "utf8").split("\n")[3]);
}

function asOwner(place: ClusterPlace, command: string, args: readonly string[]): Promise<string> {
  // Not every folder that we stand in can be entered by the owner.
  return mustRun("env", [...place.asOwner, command, ...args], { cwd: "/" });
}

function writeOwned(place: ClusterPlace, path: string, text: string): void {
  writeFileSync(path, text, { mode: 0o600 });
  if (place.owner !== null) chownSync(path, place.owner.uid, place.owner.gid);
}
