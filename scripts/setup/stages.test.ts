import { afterEach, beforeEach, expect, it, vi } from "vitest";
import { commandStage, runLanes, type Stage } from "./stages";

const lines: string[] = [];
beforeEach(() => {
  lines.length = 0;
  vi.spyOn(console, "log").mockImplementation((line: string) => void lines.push(line));
});
afterEach(() => {
  vi.restoreAllMocks();
});

const counting = (name: string, passed: number): Stage => ({
  name,
  run: () => Promise.resolve({ passed, failed: 0 }),
});

it("adds up the lanes, and goes on behind a stage that failed or broke", async () => {
  const broken: Stage = { name: "broken", run: () => Promise.reject(new Error("no such file")) };
  const wrong = commandStage("wrong", ["-e", "console.error('line 3'); process.exit(1)"]);
  const total = await runLanes([broken, counting("a", 2)], [wrong, counting("b", 3)]);
  expect(total).toEqual({ passed: 5, failed: 2 });
  const said = lines.join("\n");
  expect(said).toContain("no such file");
  expect(said).toContain("line 3");
  expect(said).toMatch(/FAILED {2}broken .*\n?/);
  expect(said).toMatch(/ok {6}b \(\d+\.\d s, 3 tests\)/);
});

it("runs lanes beside each other, and the stages of a lane in turn", async () => {
  const order: string[] = [];
  let meet: () => void = () => undefined;
  const met = new Promise<void>((resolve) => {
    meet = resolve;
  });
  const waiting: Stage = {
    name: "waiting",
    run: async () => {
      await met;
      order.push("waiting");
      return { passed: 1, failed: 0 };
    },
  };
  const then: Stage = {
    name: "then",
    run: () => {
      order.push("then");
      return Promise.resolve({ passed: 1, failed: 0 });
    },
  };
  const meeting: Stage = {
    name: "meeting",
    run: () => {
      meet();
      return Promise.resolve({ passed: 1, failed: 0 });
    },
  };
  expect(await runLanes([waiting, then], [meeting])).toEqual({ passed: 3, failed: 0 });
  expect(order).toEqual(["waiting", "then"]);
});
