import { createHash } from "node:crypto";
import { mkdtemp, rm, stat, unlink, utimes, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { AppError } from "../errors/app-error";
import { digestFile } from "./digest-file";
import { createFileStore } from "./file-store";
import { toStorageError } from "./file-system-error";

const bytes = Uint8Array.from({ length: 10_000 }, (_, index) => index % 251);
const digest = createHash("sha256").update(bytes).digest("hex");

describe("the file store", () => {
  let folder = "";
  let staged = "";
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), "tidemark-store-"));
    staged = join(folder, "staged");
    await writeFile(staged, bytes);
  });
  afterEach(() => rm(folder, { recursive: true, force: true }));

  const store = () => createFileStore(join(folder, "recordings"));
  const storedPath = () => join(folder, "recordings", digest.slice(0, 2), digest.slice(2));

  it("keeps the bytes under their digest and leaves the staged file to the caller", async () => {
    expect(await digestFile(staged)).toBe(digest);
    await store().put(staged, digest);
    expect((await stat(staged)).size).toBe(bytes.length);
    await unlink(staged);
    const recording = await store().open(digest);
    expect(recording.size).toBe(bytes.length);
    expect(await recording.read(0, 20_000)).toEqual(bytes);
    await recording.close();
  });

  it.each([
    ["from the middle", 4_000, 16, 16],
    ["across the end", 9_990, 100, 10],
    ["past the end", 20_000, 5, 0],
  ])("reads %s", async (_name, offset, length, expected) => {
    await store().put(staged, digest);
    const recording = await store().open(digest);
    expect(await recording.read(offset, length)).toEqual(bytes.subarray(offset, offset + expected));
    await recording.close();
  });

  it("streams the whole and a range", async () => {
    await store().put(staged, digest);
    const whole = await new Response(await store().stream(digest)).bytes();
    expect(whole).toEqual(bytes);
    const part = await new Response(await store().stream(digest, { from: 5, to: 9 })).bytes();
    expect(part).toEqual(bytes.subarray(5, 10));
  });

  it("takes the same bytes twice and keeps one file", async () => {
    await store().put(staged, digest);
    const first = await stat(storedPath());
    const again = join(folder, "again");
    await writeFile(again, bytes);
    await store().put(again, digest);
    expect((await stat(storedPath())).ino).toBe(first.ino);
  });

  it.each(["open", "stream", "localPath"] as const)(
    "says storage.missing on %s of nothing",
    async (act) => {
      await expect(store()[act](digest)).rejects.toMatchObject({ code: "storage.missing" });
    },
  );

  it("refuses a digest that is a path", async () => {
    await expect(store().has("../../etc/passwd")).rejects.toBeInstanceOf(AppError);
  });

  it("removes, and does not mind removing nothing", async () => {
    await store().put(staged, digest);
    await store().remove(digest);
    await store().remove(digest);
    expect(await store().has(digest)).toBe(false);
  });

  it("lists only what was put before the given moment", async () => {
    await store().put(staged, digest);
    const list = async (before: Date) => {
      const digests: string[] = [];
      for await (const one of store().listOlderThan(before)) digests.push(one);
      return digests;
    };
    expect(await list(new Date(Date.now() - 60_000))).toEqual([]);
    expect(await list(new Date(Date.now() + 60_000))).toEqual([digest]);
    // Old bytes that are put again count as young: their row may be about to be written.
    await utimes(storedPath(), new Date(0), new Date(0));
    await store().put(staged, digest);
    expect(await list(new Date(Date.now() - 60_000))).toEqual([]);
  });

  it("knows the free space", async () => {
    expect(await store().freeBytes()).toBeGreaterThan(0);
  });
});

describe("toStorageError", () => {
  it("turns a full disk into storage.full and leaves the rest alone", () => {
    const full = Object.assign(new Error("write"), { code: "ENOSPC" });
    expect(toStorageError(full)).toMatchObject({ code: "storage.full", cause: full });
    const other = new Error("other");
    expect(toStorageError(other)).toBe(other);
  });
});
