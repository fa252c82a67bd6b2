import { describe, expect, it } from "vitest";
import { checkKernel } from "./kernel";

describe("lib/analysis/kernel/kernel-bytes.ts", () => {
  it("is what its source gives (write it by scripts/entries/kernel.ts)", () => {
    expect(checkKernel(false)).toBe(true);
  });
});
