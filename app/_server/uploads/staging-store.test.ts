import { mkdtemp, readFile, rm, symlink } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Readable } from "node:stream";
import { Upload } from "@tus/server";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { writeWav } from "../../../lib/audio/write-wav";
import { RESERVE_BYTES } from "./room";
import { StagingStore } from "./staging-store";

const wav = Buffer.from(writeWav([Float64Array.from({ length: 5000 }, Math.sin)], 48_000));
let folder = "";
let store: StagingStore;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "tidemark-staging-"));
  store = new StagingStore(folder);
});
afterEach(() => rm(folder, { recursive: true, force: true }));

const begin = async (size: number): Promise<string> => {
  const metadata = { fileName: "take.wav" };
  await store.create(new Upload({ id: "a".repeat(32), size, offset: 0, metadata }));
  return "a".repeat(32);
};
const contents = () => readFile(join(folder, "a".repeat(32)));

describe("the staging store", () => {
  it.each([1, 5, 11, 12, 13, 4096])("takes a WAV in pieces of %d bytes as it is", async (size) => {
    const id = await begin(wav.length);
    const head = wav.subarray(0, 40);
    const pieces = Array.from({ length: Math.ceil(head.length / size) }, (_, i) =>
      head.subarray(i * size, (i + 1) * size),
    );
    expect(await store.write(Readable.from([...pieces, wav.subarray(40)]), id, 0)).toBe(wav.length);
    expect((await contents()).equals(wav)).toBe(true);
  });

  it("goes on in the middle, where the first bytes were seen before", async () => {
    const id = await begin(wav.length);
    await store.write(Readable.from([wav.subarray(0, 100)]), id, 0);
    expect(await store.write(Readable.from([wav.subarray(100)]), id, 100)).toBe(wav.length);
    expect((await contents()).equals(wav)).toBe(true);
  });

  it("refuses what is no recording by its first bytes, in whatever pieces they come", async () => {
    const id = await begin(1000);
    const text = Buffer.from("Level 76 dB, and so on for a while");
    const pieces = [...text].map((byte) => Buffer.from([byte]));
    await expect(store.write(Readable.from(pieces), id, 0)).rejects.toMatchObject({
      code: "audio.not-audio",
      file: "take.wav",
    });
    expect(await contents()).toHaveLength(0);
  });

  it("refuses with the figures when the room goes while bytes come in", async () => {
    store = new StagingStore(folder, () => Promise.resolve(RESERVE_BYTES - 1));
    const size = 50_000_000;
    const id = await begin(size);
    const pieces = function* () {
      yield wav;
      for (let sent = wav.length; sent < size; sent += 1_000_000) yield Buffer.alloc(1_000_000);
    };
    await expect(store.write(Readable.from(pieces()), id, 0)).rejects.toMatchObject({
      code: "storage.full",
      details: { free_bytes: RESERVE_BYTES - 1 },
    });
    // What came before the refusal waits for the rest.
    expect((await contents()).subarray(0, wav.length).equals(wav)).toBe(true);
  });

  it("says that the disk is full where the system says so", async () => {
    const id = await begin(wav.length);
    await rm(join(folder, id));
    await symlink("/dev/full", join(folder, id));
    await expect(store.write(Readable.from([wav]), id, 0)).rejects.toMatchObject({
      code: "storage.full",
      details: { needed_bytes: wav.length },
    });
  });

  it("does not take uploads of unknown length", () => {
    expect(store.hasExtension("creation-defer-length")).toBe(false);
    expect(store.hasExtension("termination")).toBe(true);
  });
});
