import { execFile } from "node:child_process";
import {
  appendFileSync,
  copyFileSync,
  mkdirSync,
  mkdtempSync,
  rmSync,
  statSync,
  utimesSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createTestClone, type TestClone } from "../support/clone";

let clone: TestClone;
beforeAll(async () => {
  clone = await createTestClone("bundles", "bundles");
});
afterAll(() => clone.remove());

interface Answer {
  code: number;
  stdout: string;
  stderr: string;
}

function run(command: string, args: string[], cwd: string): Promise<Answer> {
  return new Promise((resolve) => {
    execFile(command, args, { cwd }, (error, stdout, stderr) =>
      resolve({ code: typeof error?.code === "number" ? error.code : 0, stdout, stderr }),
    );
  });
}

/** `npm run --silent analyse -- args`, from a folder inside the clone. */
const analyse = (args: string[], folder = "."): Promise<Answer> =>
  run("npm", ["run", "--silent", "analyse", "--", ...args], join(clone.dir, folder));

const bundle = (): string => join(clone.dir, "build/analyse.mjs");
const madeAt = (): number => statSync(bundle()).mtimeMs;

describe("npm run analyse", () => {
  it("prints nothing of its own, and passes on exit code and complaint", async () => {
    const answer = await analyse(["nowhere"]);
    expect(answer.code).toBe(2);
    expect(answer.stdout).toBe("");
    const lines = answer.stderr.trim().split("\n");
    expect(JSON.parse(lines.at(-1) ?? "")).toMatchObject({ code: "series.file-missing" });
  });

  it("means folders from where the caller stands", async () => {
    mkdirSync(join(clone.dir, "docs/recordings"), { recursive: true });
    const { stderr } = await analyse(["recordings"], "docs");
    expect(stderr).not.toContain("There is no folder");
    expect(stderr).toContain("series.json");
  });

  it("uses the bundle that stands, also when a source was merely touched", async () => {
    const before = madeAt();
    utimesSync(join(clone.dir, "lib/errors/app-error.ts"), new Date(), new Date());
    await analyse(["nowhere"]);
    expect(madeAt()).toBe(before);
  });

  it("bundles anew when a source has changed", async () => {
    const before = madeAt();
    appendFileSync(join(clone.dir, "lib/errors/app-error.ts"), "\n// changed\n");
    const { code, stdout } = await analyse(["nowhere"]);
    expect([code, stdout]).toEqual([2, ""]);
    expect(madeAt()).toBeGreaterThan(before);
  });

  it("runs by Node alone, where there are no packages", async () => {
    const alone = mkdtempSync(join(tmpdir(), "tidemark-alone-"));
    try {
      copyFileSync(bundle(), join(alone, "analyse.mjs"));
      const { code, stderr } = await run(process.execPath, ["analyse.mjs", "nowhere"], alone);
      expect(code).toBe(2);
      expect(stderr).toContain("series.file-missing");
    } finally {
      rmSync(alone, { recursive: true, force: true });
    }
  });
});
