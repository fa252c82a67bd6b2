import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { bundleReaderScript, checkReaderScript } from "./reader-script";

describe("public/reader.js", () => {
  it("is what its sources give (write it by scripts/entries/reader-script.ts)", async () => {
    expect(await checkReaderScript(false)).toBe(true);
  });

  it("stays small and reaches for nothing", async () => {
    const text = await bundleReaderScript();
    expect(gzipSync(text).length).toBeLessThan(16_000);
    expect(text).not.toMatch(/\bfetch\(|XMLHttpRequest|sendBeacon|localStorage|document\.cookie/);
  });
});
