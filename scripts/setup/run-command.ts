/** Runs a program to its end. */
import { spawn } from "node:child_process";
import { createInterface } from "node:readline";

export interface CommandOptions {
  cwd?: string;
  env?: NodeJS.ProcessEnv;
  /** Shows the output on the terminal (on standard error) instead of keeping it. */
  show?: boolean;
  signal?: AbortSignal;
  /** Told each line of either stream, without its end. */
  onLine?: (line: string) => void;
}

export interface CommandResult {
  /** Exit code; null where a signal ended it. */
  code: number | null;
  /** Standard output alone, and both streams as they came. */
  stdout: string;
  output: string;
}

/** @throws Error where the program cannot be started at all, such as "ENOENT" */
export function runCommand(
  command: string,
  args: readonly string[],
  options: CommandOptions = {},
): Promise<CommandResult> {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, {
      cwd: options.cwd,
      env: options.env ?? process.env,
      stdio: ["ignore", options.show === true ? 2 : "pipe", options.show === true ? 2 : "pipe"],
      ...(options.signal === undefined ? {} : { signal: options.signal }),
    });
    let stdout = "";
    let output = "";
    child.stdout?.setEncoding("utf8").on("data", (text: string) => {
      stdout += text;
      output += text;
    });
    child.stderr?.setEncoding("utf8").on("data", (text: string) => {
      output += text;
    });
    for (const stream of [child.stdout, child.stderr]) {
      if (stream === null || options.onLine === undefined) continue;
      createInterface({ input: stream }).on("line", options.onLine);
    }
    child.on("error", reject);
    child.on("close", (code) => resolve({ code, stdout, output }));
  });
}

/** @throws Error with the last lines of the output unless the program ends with 0 */
export async function mustRun(
  command: string,
  args: readonly string[],
  options: CommandOptions = {},
): Promise<string> {
  const { code, stdout, output } = await runCommand(command, args, options);
  if (code === 0) return stdout;
  const tail = output.trim().split("\n").slice(-12).join("\n");
  throw new Error(`${[command, ...args].join(" ")} ended with ${code ?? "a signal"}\n${tail}`);
}
