import { describe, expect, it } from "vitest";
import { parseRange } from "./range";

describe("parseRange", () => {
  it.each([
    [null, null],
    ["bytes=0-0", { from: 0, to: 0 }],
    ["bytes=10-19", { from: 10, to: 19 }],
    ["bytes=90-", { from: 90, to: 99 }],
    ["bytes=90-200", { from: 90, to: 99 }],
    ["bytes=-10", { from: 90, to: 99 }],
    ["bytes=-1000", { from: 0, to: 99 }],
    ["bytes=100-", "unsatisfiable"],
    ["bytes=-0", "unsatisfiable"],
    ["bytes=9-5", null],
    ["bytes=-", null],
    ["bytes=0-1,5-6", null],
    ["lines=0-1", null],
  ])("%s of 100 bytes", (header, range) => {
    expect(parseRange(header, 100)).toEqual(range);
  });
});
