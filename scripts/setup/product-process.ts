/** A real `npm start`, watched from outside: for benches and for the tests of set-up itself. */
import { spawn } from "node:child_process";
import { cloneDir } from "./bootstrap.mjs";

export interface ProductProcess {
  /** Process id of npm itself. */
  pid: number;
  readyAfterMs: number;
  /** Everything printed so far. */
  output: () => string;
  /** Resolves with the exit code of npm once it has ended; null where a signal ended it. */
  ended: Promise<number | null>;
  /** Sends the signal to npm and waits for its end. */
  stop: (signal: NodeJS.Signals) => Promise<number | null>;
}

/**
 * @param env settings on top of this process's own
 * @param cwd the clone to start
 * @throws Error with the output where it ends before it is ready
 */
export async function startProduct(
  env: Record<string, string>,
  cwd: string = cloneDir,
): Promise<ProductProcess> {
  const startedAt = performance.now();
  const child = spawn("npm", ["start"], {
    cwd,
    env: { ...process.env, ...env },
    stdio: ["ignore", "pipe", "pipe"],
  });
  let output = "";
  const ended = new Promise<number | null>((resolve, reject) => {
    child.once("error", reject);
    child.once("close", resolve);
  });
  const ready = new Promise<void>((resolve) => {
    for (const stream of [child.stdout, child.stderr]) {
      stream.setEncoding("utf8").on("data", (text: string) => {
        output += text;
        if (output.includes("Tidemark is ready")) resolve();
      });
    }
  });
  const early = ended.then((code) => {
    throw new Error(`npm start ended with ${code ?? "a signal"} before it was ready:\n${output}`);
  });
  await Promise.race([ready, early]);
  early.catch(() => undefined);
  return {
    pid: child.pid ?? 0,
    readyAfterMs: performance.now() - startedAt,
    output: () => output,
    ended,
    stop: (signal) => {
      child.kill(signal);
      return ended;
    },
  };
}
