import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { takeLock } from "./lock";

let folder = "";
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "tidemark-lock-"));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe("takeLock", () => {
  it("has one holder until it is given back", () => {
    const path = join(folder, "one");
    const release = takeLock(path);
    expect(takeLock(path)).toBe(process.pid);
    if (typeof release !== "function") throw new Error("the lock was not free");
    release();
    expect(takeLock(path)).toBeTypeOf("function");
  });

  it.each([
    ["a process that is gone", () => JSON.stringify({ pid: endedPid(), started: "1" })],
    [
      "a process that was given the same number",
      () => JSON.stringify({ pid: process.pid, started: "1" }),
    ],
    ["a file cut short by a power cut", () => '{"pid":'],
    ["an empty file", () => ""],
  ])("does not believe %s", (_, left) => {
    const path = join(folder, "left-behind");
    writeFileSync(path, left());
    const release = takeLock(path);
    expect(release).toBeTypeOf("function");
    if (typeof release === "function") release();
  });
});

/** Number of a process that has ended. */
function endedPid(): number {
  return spawnSync("true").pid;
}
