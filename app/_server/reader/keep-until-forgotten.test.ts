import { describe, expect, it } from "vitest";
import { keepUntilForgotten } from "./keep-until-forgotten";

/** A place whose contents and clock the test moves. */
function makePlace() {
  const place = {
    value: "one" as string | null,
    looks: 0,
    nowMs: 0,
    /** Set: a look waits for it after it has read. */
    hold: null as Promise<void> | null,
  };
  const look = async () => {
    place.looks += 1;
    const { value, hold } = place;
    if (hold !== null) await hold;
    return value === null ? null : { value };
  };
  const kept = keepUntilForgotten(look, { keptMs: 1000, most: 2, now: () => place.nowMs });
  const ask = async (key = "a") => (await kept.ask(key))?.value ?? null;
  return { place, kept, ask };
}

describe("keepUntilForgotten", () => {
  it("looks once while the moment lasts, then again", async () => {
    const { place, ask } = makePlace();
    expect([await ask(), await ask()]).toEqual(["one", "one"]);
    place.nowMs = 999;
    place.value = "two";
    expect([await ask(), place.looks]).toEqual(["one", 1]);
    place.nowMs = 1000;
    expect([await ask(), place.looks]).toEqual(["two", 2]);
  });

  it("answers with nothing from before once it was told to forget", async () => {
    const { place, kept, ask } = makePlace();
    await ask();
    place.value = "withdrawn";
    kept.forget();
    expect(await ask()).toBe("withdrawn");
  });

  it("does not keep a look that was under way when it was told to forget", async () => {
    const { place, kept, ask } = makePlace();
    let release = (): void => undefined;
    place.hold = new Promise((resolve) => {
      release = resolve;
    });
    const early = ask();
    place.value = "withdrawn";
    kept.forget();
    place.hold = null;
    release();
    expect(await early).toBe("one");
    expect(await ask()).toBe("withdrawn");
  });

  it("never keeps that nothing is there", async () => {
    const { place, ask } = makePlace();
    place.value = null;
    expect(await ask()).toBeNull();
    place.value = "out";
    expect(await ask()).toBe("out");
  });

  it("begins anew rather than keep ever more", async () => {
    const { place, ask } = makePlace();
    for (const key of ["a", "b", "c"]) await ask(key);
    expect(place.looks).toBe(3);
    await ask("c");
    expect(place.looks).toBe(3);
    await ask("a");
    expect(place.looks).toBe(4);
  });
});
