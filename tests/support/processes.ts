/** Processes of the product as a test sees them: ended without warning, or slowed down. */
import { readdirSync, readFileSync } from "node:fs";
import { setTimeout as sleep } from "node:timers/promises";
import type { Supervised } from "../../scripts/setup/supervisor";

/** Signals the present life of a supervised process, with its children, and waits until it is gone. */
export async function endLife(process_: Supervised, signal: "SIGKILL" | "SIGTERM"): Promise<void> {
  const pid = await livingPid(process_);
  process.kill(pid, signal);
  while (process_.pid() === pid) await sleep(5);
}

/** Waits out the pause between two lives. */
export async function livingPid(process_: Supervised): Promise<number> {
  for (;;) {
    const pid = process_.pid();
    if (pid !== null) return pid;
    await sleep(10);
  }
}

export function childrenOf(pid: number): number[] {
  return readdirSync("/proc")
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .filter((candidate) => parentOf(candidate) === pid);
}

/**
 * Gives the children of a process a share of their time, those that come later as well, until it is
 * called off: so that a test sees each stage.
 */
export function slowDown(parent: number, share: number): () => void {
  const signal = (name: "SIGSTOP" | "SIGCONT"): void => {
    for (const pid of childrenOf(parent)) {
      try {
        process.kill(pid, name);
      } catch {
        // Gone meanwhile.
      }
    }
  };
  const stopping = new AbortController();
  const period = 50;
  const turn = async (): Promise<void> => {
    while (!stopping.signal.aborted) {
      signal("SIGSTOP");
      await sleep(period * (1 - share));
      signal("SIGCONT");
      await sleep(period * share);
    }
  };
  void turn();
  return () => {
    stopping.abort();
    signal("SIGCONT");
  };
}

function parentOf(pid: number): number {
  try {
    // "pid (name) state ppid …"; the name may hold anything but is closed by the last ")".
    const text = readFileSync(`/proc/${pid}/stat`, "utf8");
    return Number(text.slice(text.lastIndexOf(")") + 2).split(" ")[1]);
  } catch {
    return -1;
  }
}
