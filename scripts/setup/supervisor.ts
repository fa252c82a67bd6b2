/** Keeps child processes running and ends them in order. */
import { type ChildProcess, spawn } from "node:child_process";
import { setTimeout as sleep } from "node:timers/promises";
import { createInterface } from "node:readline";
import { program } from "./system-packages";

export interface ChildPlan {
  /** Stands before each of its lines. */
  name: string;
  /** Arguments to Node. */
  args: readonly string[];
  env: NodeJS.ProcessEnv;
  cwd: string;
  /** How long it may take to end after SIGTERM before it is killed. */
  graceMs: number;
  /** The pause between two lives doubles up to here. */
  longestPauseMs?: number;
}

export interface Supervised {
  /** Process id of the present life; null between two lives. */
  pid: () => number | null;
  /** Ends it for good and waits until it is gone. */
  stop: () => Promise<void>;
}

const FIRST_PAUSE_MS = 500;
const LONGEST_PAUSE_MS = 30_000;
const LAST_WORDS_MS = 500;
/** A child that lived this long starts again at once. */
const SETTLED_MS = 30_000;

/** @param write receives whole lines without their end */
export function supervise(plan: ChildPlan, write: (line: string) => void): Supervised {
  const stopping = new AbortController();
  let child: ChildProcess | null = null;

  const live = async (): Promise<void> => {
    let pauseMs = FIRST_PAUSE_MS;
    while (!stopping.signal.aborted) {
      const bornAt = Date.now();
      child = startChild(plan, write);
      const end = await waitForEnd(child);
      child = null;
      if (stopping.signal.aborted) return;
      if (Date.now() - bornAt > SETTLED_MS) pauseMs = FIRST_PAUSE_MS;
      write(`${plan.name} | ended with ${end}; starting again in ${pauseMs / 1000} s`);
      await sleep(pauseMs, undefined, { signal: stopping.signal }).catch(() => undefined);
      pauseMs = Math.min(2 * pauseMs, plan.longestPauseMs ?? LONGEST_PAUSE_MS);
    }
  };
  const ended = live();

  return {
    pid: () => child?.pid ?? null,
    stop: async () => {
      stopping.abort();
      const present = child;
      present?.kill("SIGTERM");
      const timer = setTimeout(() => {
        write(`${plan.name} | did not end within ${plan.graceMs / 1000} s; killed`);
        present?.kill("SIGKILL");
      }, plan.graceMs);
      await ended;
      clearTimeout(timer);
    },
  };
}

function startChild(plan: ChildPlan, write: (line: string) => void): ChildProcess {
  // Should we be killed outright, the kernel tells the child to end, so that none stays behind.
  const prefix = program("setpriv").present() ? ["setpriv", "--pdeathsig", "TERM", "--"] : [];
  const child = spawn("env", [...prefix, process.execPath, ...plan.args], {
    cwd: plan.cwd,
    env: plan.env,
    stdio: ["ignore", "pipe", "pipe"],
    // A group of its own: an interrupt at the terminal reaches us alone, and we end it in order.
    detached: true,
  });
  for (const stream of [child.stdout, child.stderr]) {
    createInterface({ input: stream }).on("line", (line) => write(`${plan.name} | ${line}`));
  }
  return child;
}

function waitForEnd(child: ChildProcess): Promise<string> {
  return new Promise((resolve) => {
    child.once("error", (error) => resolve(error.message));
    child.once("exit", (code, signal) => {
      const end = (): void => resolve(signal ?? `code ${code ?? "unknown"}`);
      // Its last words are still on their way; a child of its own may hold the pipes for longer.
      child.once("close", () => setImmediate(end));
      setTimeout(end, LAST_WORDS_MS);
    });
  });
}
