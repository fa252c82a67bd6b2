/** Other people's audio programs, as the tests call them. npm test installs both from the distribution. */
import { execFile } from "node:child_process";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { promisify } from "node:util";

const run = promisify(execFile);

/** Runs a program to its end; its standard output as bytes. Fails with what it said on standard error. */
async function call(program: string, args: readonly string[]): Promise<Buffer> {
  const { stdout } = await run(program, args, { encoding: "buffer", maxBuffer: 1 << 28 });
  return stdout;
}

/** @param args as on the command line. Quiet, repeatable dither. */
export const runSox = (args: readonly string[]): Promise<Buffer> =>
  call("sox", ["-V1", "-R", ...args]);

export const runFfmpeg = (args: readonly string[]): Promise<Buffer> =>
  call("ffmpeg", [
    "-hide_banner",
    "-loglevel",
    "error",
    "-nostdin",
    "-y",
    "-threads",
    "1",
    ...args,
  ]);

/** A folder of its own that goes when the work is done. */
export async function withFolder<T>(work: (folder: string) => Promise<T>): Promise<T> {
  const folder = await mkdtemp(join(tmpdir(), "tidemark-programs-"));
  try {
    return await work(folder);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}
