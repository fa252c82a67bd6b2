import { setTimeout as sleep } from "node:timers/promises";
import { describe, expect, it } from "vitest";
import { supervise } from "./supervisor";

async function until(what: () => boolean): Promise<void> {
  const giveUpAt = Date.now() + 8000;
  while (!what()) {
    if (Date.now() > giveUpAt) throw new Error("it did not happen within 8 s");
    await sleep(20);
  }
}

function start(script: string, graceMs = 5000) {
  const lines: string[] = [];
  const child = supervise(
    { name: "child", args: ["-e", script], env: process.env, cwd: "/", graceMs },
    (line) => lines.push(line),
  );
  return { child, lines };
}

const FOREVER = "setInterval(() => {}, 1000); console.log('up ' + process.pid);";
const up = (line: string): boolean => line.startsWith("child | up");

describe("supervise", () => {
  it("puts the name before every line of both streams", async () => {
    const { child, lines } = start(`${FOREVER} console.error('and this');`);
    await until(() => lines.length === 2);
    await child.stop();
    expect(lines.toSorted()).toEqual([
      "child | and this",
      expect.stringMatching(/^child \| up \d+$/),
    ]);
  });

  it("starts a killed child again, says so, and ends it for good when asked", async () => {
    const { child, lines } = start(FOREVER);
    await until(() => lines.filter(up).length === 1);
    const first = child.pid() ?? 0;
    process.kill(first, "SIGKILL");
    await until(() => lines.filter(up).length === 2);
    expect(lines).toContain("child | ended with SIGKILL; starting again in 0.5 s");
    const second = child.pid() ?? 0;
    expect(second).not.toBe(first);
    await child.stop();
    expect(child.pid()).toBeNull();
    expect(() => process.kill(second, 0)).toThrow("ESRCH");
  });

  it("waits longer after each crash", async () => {
    const { child, lines } = start("process.exit(3)");
    await until(() => lines.length === 2);
    await child.stop();
    expect(lines).toEqual([
      "child | ended with code 3; starting again in 0.5 s",
      "child | ended with code 3; starting again in 1 s",
    ]);
  });

  it("lets a child finish its work within the grace", async () => {
    const { child, lines } = start(
      `${FOREVER} process.on('SIGTERM', () => setTimeout(() => { console.log('done'); process.exit(); }, 300));`,
    );
    await until(() => lines.some(up));
    await child.stop();
    expect(lines.at(-1)).toBe("child | done");
  });

  it("kills a child that does not end", async () => {
    const { child, lines } = start(`process.on('SIGTERM', () => {}); ${FOREVER}`, 200);
    await until(() => lines.some(up));
    await child.stop();
    expect(lines.at(-1)).toBe("child | did not end within 0.2 s; killed");
    expect(child.pid()).toBeNull();
  });
});
