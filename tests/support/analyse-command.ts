/** The built analysis command, run by node alone as an outsider would. */
import { execFile } from "node:child_process";
import { bundlePath } from "../../scripts/setup/bundles.mjs";

export interface CommandOutcome {
  code: number;
  stdout: string;
  stderr: string;
}

/** @param cwd where names on the command line are meant from. */
export function runAnalyse(cwd: string, ...args: string[]): Promise<CommandOutcome> {
  return new Promise((done) => {
    execFile(
      process.execPath,
      [bundlePath("analyse"), ...args],
      { cwd, maxBuffer: 2 ** 27 },
      (error, stdout, stderr) => {
        done({
          code: typeof error?.code === "number" ? error.code : error === null ? 0 : -1,
          stdout,
          stderr,
        });
      },
    );
  });
}
