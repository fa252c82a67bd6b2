/**
 * A process of its own for computing, so that a busy processor never keeps the worker from renewing
 * the locks of its jobs. It stays warm between tasks and is made anew when it dies.
 */
import { fork, type ChildProcess } from "node:child_process";
import { fileURLToPath } from "node:url";
import { AppError } from "../../lib/errors/app-error";
import type { Answer, ProgressEvent, Reply, Request, Task } from "./messages";
import { fromSentError } from "./sent-error";

export interface ComputeOptions {
  onProgress?: (event: ProgressEvent) => void;
  /** Ends the task at once, and the process with it. */
  signal?: AbortSignal;
}

export interface ComputingChild {
  /**
   * One task at a time; others wait for their turn.
   *
   * @throws AppError with the code of the engine; "analysis.cancelled" after an abort; Error where
   *   the process died.
   */
  run<T extends Task>(task: T, options?: ComputeOptions): Promise<Answer<T>>;
  close(): void;
}

/** Beside this module: the source under tsx, the bundle in build/. */
export function findComputeProgram(moduleUrl: string): string {
  const source = moduleUrl.endsWith(".ts");
  return fileURLToPath(
    new URL(source ? "../compute-process.ts" : "./compute-process.mjs", moduleUrl),
  );
}

export function createComputingChild(
  program: string = findComputeProgram(import.meta.url),
): ComputingChild {
  let child: ChildProcess | null = null;
  let lastId = 0;
  let turn: Promise<unknown> = Promise.resolve();

  const getChild = (): ChildProcess => {
    if (child === null || !child.connected) {
      const made = fork(program, { serialization: "advanced", stdio: ["ignore", 2, 2, "ipc"] });
      made.once("exit", () => {
        if (child === made) child = null;
      });
      child = made;
    }
    return child;
  };

  const runNow = <T extends Task>(task: T, options: ComputeOptions): Promise<Answer<T>> => {
    if (options.signal?.aborted === true) return Promise.reject(cancelled());
    const process = getChild();
    const id = (lastId += 1);
    return new Promise((resolve, reject) => {
      const onMessage = (reply: Reply): void => {
        if (reply.id !== id) return;
        if (reply.kind === "progress") {
          options.onProgress?.(reply.event);
          return;
        }
        settle();
        if (reply.kind === "error") reject(fromSentError(reply.error));
        // The process answers a task of this kind with its own answer, and no other.
        // oxlint-disable-next-line typescript/no-unsafe-type-assertion
        else resolve(reply.answer as Answer<T>);
      };
      const onExit = (code: number | null, signal: string | null): void => {
        settle();
        reject(new Error(`the computing process ended with ${code ?? signal ?? "nothing said"}`));
      };
      const onError = (error: Error): void => {
        settle();
        process.kill("SIGKILL");
        reject(error);
      };
      const onAbort = (): void => {
        settle();
        process.kill("SIGKILL");
        if (child === process) child = null;
        reject(cancelled());
      };
      const settle = (): void => {
        process.off("message", onMessage).off("exit", onExit).off("error", onError);
        options.signal?.removeEventListener("abort", onAbort);
      };
      process.on("message", onMessage).on("exit", onExit).on("error", onError);
      options.signal?.addEventListener("abort", onAbort, { once: true });
      const request: Request = { id, task };
      process.send(request, (error) => {
        if (error !== null) onError(error);
      });
    });
  };

  return {
    run: (task, options = {}) => {
      const mine = turn.then(() => runNow(task, options));
      turn = mine.catch(() => undefined);
      return mine;
    },
    close: () => {
      child?.disconnect();
      child = null;
    },
  };
}

const cancelled = (): AppError => new AppError("analysis.cancelled", "The work was cancelled.");
