import { setImmediate as tick } from "node:timers/promises";
import { expect, it } from "vitest";
import { latestOnly } from "./latest-only";

it("tells the last state, and no state twice at a time", async () => {
  const told: number[] = [];
  let state = 0;
  let atOnce = 0;
  const faults: unknown[] = [];
  const tell = latestOnly(
    async () => {
      atOnce += 1;
      expect(atOnce).toBe(1);
      const seen = state;
      await tick();
      told.push(seen);
      atOnce -= 1;
      if (seen === 2) throw new Error("cut");
    },
    (error) => faults.push(error),
  );
  for (state = 1; state <= 2; state += 1) tell();
  state = 2;
  await tick();
  await tick();
  await tick();
  state = 3;
  tell();
  await tick();
  await tick();
  expect(told).toEqual([1, 2, 3]);
  expect(faults).toHaveLength(1);
});
