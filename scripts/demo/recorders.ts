/** Processes that make recordings beside each other: a sweep takes most of a second to play. */
import { fork, type ChildProcess } from "node:child_process";
import { fileURLToPath } from "node:url";
import type { DemoSeries } from "./demo-labs";

/** One recording of a series, to be written as a file. */
export interface RecordingJob {
  series: DemoSeries;
  slot: string;
  path: string;
}

export interface Recorders {
  /** Jobs wait for a free process, first come first served. @throws Error with the process's words */
  record: (job: RecordingJob) => Promise<void>;
  close: () => void;
}

/** What the process answers: null where the file stands. */
export type RecordingAnswer = { error: string | null };

/** Beside the caller: the source under tsx, the bundle in build/. */
export function findRecordProgram(callerUrl: string): string {
  const ending = callerUrl.endsWith(".ts") ? "ts" : "mjs";
  return fileURLToPath(new URL(`./record-demo.${ending}`, callerUrl));
}

export function openRecorders(program: string, count: number): Recorders {
  const children = Array.from({ length: count }, () =>
    fork(program, { stdio: ["ignore", 2, 2, "ipc"] }),
  );
  const idle = [...children];
  const waiting: ((child: ChildProcess) => void)[] = [];
  const take = (): Promise<ChildProcess> => {
    const child = idle.shift();
    if (child !== undefined) return Promise.resolve(child);
    return new Promise((resolve) => waiting.push(resolve));
  };
  const giveBack = (child: ChildProcess): void => {
    const next = waiting.shift();
    if (next === undefined) idle.push(child);
    else next(child);
  };
  return {
    record: async (job) => {
      const child = await take();
      try {
        await recordWith(child, job);
      } finally {
        giveBack(child);
      }
    },
    close: () => children.forEach((child) => child.connected && child.disconnect()),
  };
}

function recordWith(child: ChildProcess, job: RecordingJob): Promise<void> {
  return new Promise((resolve, reject) => {
    const settle = (error: string | null): void => {
      child.off("message", onMessage).off("exit", onExit);
      if (error === null) resolve();
      else reject(new Error(`${job.series.name}, ${job.slot}: ${error}`));
    };
    const onMessage = (answer: RecordingAnswer): void => settle(answer.error);
    const onExit = (): void => settle("the process that makes recordings ended");
    if (!child.connected) {
      onExit();
      return;
    }
    child.on("message", onMessage).on("exit", onExit);
    child.send(job, (error) => {
      if (error !== null) settle(error.message);
    });
  });
}
