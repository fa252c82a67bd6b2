import { existsSync, readFileSync, rmSync, statSync } from "node:fs";
import { createServer, connect } from "node:net";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { type ProductProcess, startProduct } from "../../scripts/setup/product-process";
import { createTestClone, type TestClone } from "../support/clone";

let clone: TestClone;
let product: ProductProcess | null = null;

beforeAll(async () => {
  clone = await createTestClone("start", "everything");
});
afterEach(async () => {
  await product?.stop("SIGTERM");
  product = null;
});
afterAll(() => clone.remove());

async function start(env: Record<string, string> = {}): Promise<ProductProcess> {
  product = await startProduct({ ...clone.env, ...env }, clone.dir);
  return product;
}

/** What a start says that cannot succeed. */
async function refusal(env: Record<string, string>): Promise<string> {
  try {
    const unexpected = await startProduct({ ...clone.env, ...env }, clone.dir);
    await unexpected.stop("SIGTERM");
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
  throw new Error("the start was not refused");
}

const isListening = (port: number): Promise<boolean> =>
  new Promise((resolve) => {
    const socket = connect(port, "127.0.0.1");
    socket.once("connect", () => {
      socket.destroy();
      resolve(true);
    });
    socket.once("error", () => resolve(false));
  });

const listening = async (): Promise<boolean[]> => [
  await isListening(clone.webPort),
  await isListening(clone.databasePort),
];

const supervisorPid = (): number => {
  const text = readFileSync(join(clone.dataDir, "supervisor.json"), "utf8");
  return (JSON.parse(text) as { pid: number }).pid;
};

const postmasterPid = (): number =>
  Number(readFileSync(join(clone.dataDir, "postgres/data/postmaster.pid"), "utf8").split("\n")[0]);

async function until(what: () => Promise<boolean>): Promise<void> {
  const giveUpAt = Date.now() + 20_000;
  while (!(await what())) {
    if (Date.now() > giveUpAt) throw new Error("it did not happen within 20 s");
    await sleep(100);
  }
}

describe("npm start", () => {
  it.each(["SIGTERM", "SIGINT"] as const)(
    "serves, and ends in order when npm itself gets %s",
    async (signal) => {
      const running = await start();
      expect(await listening()).toEqual([true, true]);
      const answer = await fetch(`http://127.0.0.1:${clone.webPort}/`, { redirect: "manual" });
      expect(answer.status).toBeLessThan(500);
      const mailbox = /Mail: http:\/\/127\.0\.0\.1:(\d+)/.exec(running.output())?.[1] ?? "";
      const mails = await fetch(`http://127.0.0.1:${mailbox}/`);
      expect(await mails.text()).toContain("No mail yet");
      expect(await running.stop(signal)).toBe(0);
      expect(await listening()).toEqual([false, false]);
      expect(await isListening(Number(mailbox))).toBe(false);
      expect(running.output()).toContain("Stopped.");
    },
  );

  it("says where the data lie and keeps secrets to itself", async () => {
    const running = await start();
    expect(running.output()).toContain(`Data: ${clone.dataDir}`);
    expect(running.output()).toMatch(/Database: \S+, port \d+/);
    expect(statSync(join(clone.dataDir, "secrets.json")).mode & 0o777).toBe(0o600);
  });

  it("is up again in seconds, with nothing made anew", async () => {
    const running = await start();
    expect(running.readyAfterMs).toBeLessThan(15_000);
    expect(running.output()).not.toMatch(/Installing|Building|Made new/);
  });

  it("refuses a second start from the same folder in one sentence", async () => {
    await start();
    const sentence = await refusal({});
    expect(sentence).toMatch(/Tidemark runs from .* already \(process \d+\)/);
    expect(sentence).not.toContain("    at ");
    expect(await listening()).toEqual([true, true]);
  });

  it("leaves nothing behind when the supervisor is killed, and starts over what stands", async () => {
    const running = await start();
    process.kill(supervisorPid(), "SIGKILL");
    await running.ended;
    await until(async () => !(await isListening(clone.webPort)));
    const again = await start();
    expect(await listening()).toEqual([true, true]);
    expect(await again.stop("SIGTERM")).toBe(0);
    expect(await listening()).toEqual([false, false]);
  });

  it("starts the database again after a kill -9", async () => {
    await start();
    const killed = postmasterPid();
    process.kill(killed, "SIGKILL");
    // Between its end and its new start there is no file that names it.
    await until(async () => {
      if (!existsSync(join(clone.dataDir, "postgres/data/postmaster.pid"))) return false;
      return postmasterPid() !== killed && (await isListening(clone.databasePort));
    });
    expect(await listening()).toEqual([true, true]);
  });

  it("starts over a database whose server was killed while nobody watched", async () => {
    const running = await start();
    process.kill(supervisorPid(), "SIGKILL");
    await running.ended;
    process.kill(postmasterPid(), "SIGKILL");
    await start();
    expect(await listening()).toEqual([true, true]);
  });

  it("makes new secrets where they were lost, over the same database", async () => {
    const first = await start();
    await first.stop("SIGTERM");
    rmSync(join(clone.dataDir, "secrets.json"));
    const second = await start();
    expect(second.output()).toContain("Made new secrets");
    expect(await listening()).toEqual([true, true]);
  });
});

describe("npm start says in one sentence", () => {
  it.each([
    ["TIDEMARK_WEB_PORT", "webPort"],
    ["TIDEMARK_DB_PORT", "databasePort"],
  ] as const)("that a stranger holds the port of %s", async (variable, key) => {
    const stranger = createServer();
    await new Promise<void>((resolve) => stranger.listen(clone[key], "127.0.0.1", resolve));
    try {
      const sentence = await refusal({});
      expect(sentence).toContain(`Port ${clone[key]} on 127.0.0.1 is in use`);
      expect(sentence).toContain(`set ${variable} to a free port`);
      expect(sentence).not.toContain("    at ");
    } finally {
      await new Promise((resolve) => stranger.close(resolve));
    }
  });

  it("which setting cannot be used", async () => {
    const sentence = await refusal({ TIDEMARK_WEB_PORT: "many" });
    expect(sentence).toContain('TIDEMARK_WEB_PORT is "many"; allowed: a port, 1 to 65535.');
    expect(sentence).not.toContain("    at ");
  });

  it("that an address is not of this machine", async () => {
    const sentence = await refusal({ TIDEMARK_WEB_HOST: "192.0.2.1" });
    expect(sentence).toContain("Nothing can listen on 192.0.2.1");
    expect(sentence).toContain("TIDEMARK_WEB_HOST");
  });
});
