import { describe, expect, it } from "vitest";
import {
  createUploadController,
  type ChosenFile,
  type StartTransfer,
  type TransferEvents,
} from "./upload-controller";
import { toFingerprint } from "./tus-transfer";

const choose = (name: string, bytes = 1000, slot: string | null = null): ChosenFile => ({
  file: new File([new Uint8Array(bytes)], name, { lastModified: 5 }),
  slot,
  shownSlot: slot,
});

/** Stands for the network: keeps what was begun, and lets the test speak for the server. */
function makeBench() {
  const begun: { name: string; events: TransferEvents; ended: string[] }[] = [];
  const received: (string | null)[] = [];
  let clock = 0;
  const startTransfer: StartTransfer = (chosen, events) => {
    const ended: string[] = [];
    begun.push({ name: chosen.file.name, events, ended });
    return {
      stop: () => Promise.resolve(void ended.push("stopped")),
      discard: () => Promise.resolve(void ended.push("discarded")),
    };
  };
  let ids = 0;
  const controller = createUploadController({
    startTransfer,
    onReceived: (runId) => Promise.resolve(void received.push(runId)),
    now: () => clock,
    newId: () => String((ids += 1)),
  });
  const states = (): string[] => controller.getItems().map((i) => `${i.fileName} ${i.state}`);
  return { controller, begun, received, states, pass: (ms: number) => void (clock += ms) };
}

describe("createUploadController", () => {
  it("sends two at once and the next when one has arrived", async () => {
    const bench = makeBench();
    bench.controller.add([choose("a"), choose("b"), choose("c")]);
    expect(bench.states()).toEqual(["a sending", "b sending", "c waiting"]);
    bench.begun[0]?.events.onDone("run-a");
    await Promise.resolve();
    await Promise.resolve();
    expect(bench.received).toEqual(["run-a"]);
    expect(bench.states()).toEqual(["b sending", "c sending"]);
  });

  it("counts bytes and speed", () => {
    const bench = makeBench();
    bench.controller.add([choose("a")]);
    bench.pass(500);
    bench.begun[0]?.events.onProgress(250);
    expect(bench.controller.getItems()[0]).toMatchObject({ sentBytes: 250, bytesPerS: 500 });
    bench.pass(500);
    bench.begun[0]?.events.onProgress(750);
    expect(bench.controller.getItems()[0]?.bytesPerS).toBeCloseTo(650, 9);
  });

  it("stops, keeps what arrived, and goes on with the same file", async () => {
    const bench = makeBench();
    bench.controller.add([choose("a")]);
    bench.begun[0]?.events.onProgress(400);
    await bench.controller.stop("1");
    expect(bench.begun[0]?.ended).toEqual(["stopped"]);
    expect(bench.controller.getItems()[0]).toMatchObject({ state: "stopped", sentBytes: 400 });
    bench.controller.goOn("1");
    expect(bench.begun.map((b) => b.name)).toEqual(["a", "a"]);
    expect(bench.states()).toEqual(["a sending"]);
  });

  it("hears nothing from a transfer that was stopped", async () => {
    const bench = makeBench();
    bench.controller.add([choose("a")]);
    await bench.controller.stop("1");
    bench.begun[0]?.events.onFault("late");
    expect(bench.states()).toEqual(["a stopped"]);
  });

  it("says a lost connection and forgets it with the next byte", () => {
    const bench = makeBench();
    bench.controller.add([choose("a")]);
    bench.begun[0]?.events.onRetrying();
    expect(bench.states()).toEqual(["a retrying"]);
    bench.begun[0]?.events.onProgress(10);
    expect(bench.states()).toEqual(["a sending"]);
  });

  it("keeps a refused file with the server's reason and lets the next one go", () => {
    const bench = makeBench();
    bench.controller.add([choose("a"), choose("b"), choose("c")]);
    bench.begun[0]?.events.onFault("Not an audio file.");
    expect(bench.states()).toEqual(["a failed", "b sending", "c sending"]);
    expect(bench.controller.getItems()[0]?.fault).toBe("Not an audio file.");
  });

  it("discards a file and what arrived of it", async () => {
    const bench = makeBench();
    bench.controller.add([choose("a")]);
    await bench.controller.discard("1");
    expect(bench.begun[0]?.ended).toEqual(["discarded"]);
    expect(bench.controller.getItems()).toEqual([]);
  });

  it("gives the same array until something changes", () => {
    const bench = makeBench();
    let told = 0;
    const end = bench.controller.subscribe(() => (told += 1));
    bench.controller.add([choose("a")]);
    const before = bench.controller.getItems();
    expect(bench.controller.getItems()).toBe(before);
    expect(told).toBeGreaterThan(0);
    end();
    const heard = told;
    bench.begun[0]?.events.onProgress(1);
    expect(told).toBe(heard);
    expect(bench.controller.getItems()).not.toBe(before);
  });
});

describe("toFingerprint", () => {
  it("tells series, places and new recordings apart", () => {
    const file = choose("a.wav");
    const later = { ...file, file: new File(["x"], "a.wav", { lastModified: 6 }) };
    const all = [
      toFingerprint("s1", file),
      toFingerprint("s2", file),
      toFingerprint("s1", { ...file, slot: "short-76" }),
      toFingerprint("s1", later),
    ];
    expect(new Set(all).size).toBe(4);
    expect(toFingerprint("s1", choose("a.wav"))).toBe(all[0]);
  });
});
