import { describe, expect, it } from "vitest";
import { takeTurns } from "./take-turns";

/** A look that ends when told to. */
function makeLook() {
  const ends: ((value: number | Error) => void)[] = [];
  const look = (): Promise<number> =>
    new Promise((resolve, reject) => {
      ends.push((value) => (value instanceof Error ? reject(value) : resolve(value)));
    });
  return { ends, look };
}
const settle = () => new Promise((resolve) => setTimeout(resolve, 0));

describe("takeTurns", () => {
  it("never answers with a look that began before the question", async () => {
    const { ends, look } = makeLook();
    const ask = takeTurns(look);
    const first = ask("a");
    const crowd = [ask("a"), ask("a"), ask("a")];
    expect(ends).toHaveLength(1);
    ends[0]?.(1);
    expect(await first).toBe(1);
    await settle();
    expect(ends).toHaveLength(2);
    ends[1]?.(2);
    expect(await Promise.all(crowd)).toEqual([2, 2, 2]);
  });

  it("keeps keys apart, and starts afresh once nobody waits", async () => {
    const { ends, look } = makeLook();
    const ask = takeTurns(look);
    const a = ask("a");
    const b = ask("b");
    expect(ends).toHaveLength(2);
    ends[0]?.(1);
    ends[1]?.(2);
    expect([await a, await b]).toEqual([1, 2]);
    await settle();
    const again = ask("a");
    expect(ends).toHaveLength(3);
    ends[2]?.(3);
    expect(await again).toBe(3);
  });

  it("gives those who wait their own look after a failed one", async () => {
    const { ends, look } = makeLook();
    const ask = takeTurns(look);
    const first = ask("a");
    const second = ask("a");
    ends[0]?.(new Error("gone"));
    await expect(first).rejects.toThrow("gone");
    await settle();
    ends[1]?.(4);
    expect(await second).toBe(4);
  });
});
