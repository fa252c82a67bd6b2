import { describe, expect, it } from "vitest";
import { checkFftKernel } from "./fft-kernel";

describe("lib/analysis/fft/kernel-bytes.ts", () => {
  it("is what its source gives (write it by scripts/entries/fft-kernel.ts)", () => {
    expect(checkFftKernel(false)).toBe(true);
  });
});
