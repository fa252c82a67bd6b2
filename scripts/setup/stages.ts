/** Stages of a check, in lanes beside each other; a failed one does not hide the rest. */
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { cloneDir } from "./bootstrap.mjs";
import { packageFile } from "./package-file";
import { runCommand } from "./run-command";
import { listenForStop } from "./stop-request";
import { readCounts, type TestCounts } from "./test-counts";

export interface Stage {
  name: string;
  /**
   * @returns tests passed and failed; a check that is no test suite counts nothing where it
   *   passes and one failure where it does not
   */
  run: (show: (text: string) => void, signal: AbortSignal) => Promise<TestCounts>;
}

const NONE: TestCounts = { passed: 0, failed: 0 };

/** A program that passes by ending with 0; its output is shown only where it fails. */
export function commandStage(
  name: string,
  args: readonly string[],
  judge: (stdout: string) => string | null = () => null,
): Stage {
  return {
    name,
    run: async (show, signal) => {
      const { code, stdout, output } = await runCommand(process.execPath, args, {
        cwd: cloneDir,
        env: { ...process.env, NEXT_TELEMETRY_DISABLED: "1" },
        signal,
      });
      const complaint = code === 0 ? judge(stdout) : output;
      if (complaint === null) return NONE;
      show(complaint);
      return { passed: 0, failed: 1 };
    },
  };
}

/**
 * One run of Vitest over a project; a run without tests is a failure.
 *
 * @param niceness how far it steps back for what else wants a core, as `nice` has it; 0 to 19
 */
export function vitestStage(project: string, niceness = 0): Stage {
  return {
    name: `${project} tests`,
    run: async (show, signal) => {
      const folder = mkdtempSync(join(tmpdir(), "tidemark-tests-"));
      const report = join(folder, "report.json");
      try {
        const { code, output } = await runCommand(
          "nice",
          [
            "-n",
            String(niceness),
            process.execPath,
            packageFile("vitest/vitest.mjs"),
            "run",
            `--project=${project}`,
            "--reporter=default",
            "--reporter=json",
            `--outputFile.json=${report}`,
          ],
          { cwd: cloneDir, env: { ...process.env, NODE_ENV: "test", NO_COLOR: "1" }, signal },
        );
        const counts = readCounts(report, code);
        if (counts.failed > 0) show(output);
        return counts;
      } finally {
        rmSync(folder, { recursive: true, force: true });
      }
    },
  };
}

/**
 * Runs each lane's stages one after the other, and the lanes beside each other.
 *
 * @returns the sum over all stages; an interrupted run has failed
 */
export async function runLanes(...lanes: readonly (readonly Stage[])[]): Promise<TestCounts> {
  const { signal } = listenForStop();
  const counts = await Promise.all(lanes.map((stages) => runStages(stages, signal)));
  return counts.reduce(add, NONE);
}

async function runStages(stages: readonly Stage[], signal: AbortSignal): Promise<TestCounts> {
  let total = NONE;
  for (const stage of stages) {
    if (signal.aborted) return add(total, { passed: 0, failed: 1 });
    total = add(total, await runStage(stage, signal));
  }
  return total;
}

async function runStage({ name, run }: Stage, signal: AbortSignal): Promise<TestCounts> {
  const startedAt = Date.now();
  const show = (text: string): void => console.log(`\n--- ${name} ---\n${text.trimEnd()}\n`);
  const counts = await run(show, signal).catch((error: unknown) => {
    show(error instanceof Error ? (error.stack ?? error.message) : String(error));
    return { passed: 0, failed: 1 };
  });
  const tests = counts.passed > 0 ? `, ${counts.passed} tests` : "";
  const seconds = ((Date.now() - startedAt) / 1000).toFixed(1);
  console.log(`${counts.failed === 0 ? "ok    " : "FAILED"}  ${name} (${seconds} s${tests})`);
  return counts;
}

const add = (a: TestCounts, b: TestCounts): TestCounts => ({
  passed: a.passed + b.passed,
  failed: a.failed + b.failed,
});
