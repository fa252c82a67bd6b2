import { describe, expect, it } from "vitest";
import { toHoldings, toRetentionWords } from "./keeping-words";

const series = {
  id: "",
  number: "S-0001",
  loudspeaker: "A B",
  archived_at: "",
  removable: 0,
  removable_bytes: 0,
  cited: 0,
  shared: 0,
  due_at: null,
};

describe("toHoldings", () => {
  it.each([
    [{ removable: 1, removable_bytes: 2_200_000 }, "1 recording, 2.2\u00a0MB"],
    [
      { removable: 8, removable_bytes: 30_100_000, cited: 3 },
      "8 recordings, 30.1\u00a0MB; 3 cited by a publication",
    ],
    [{ cited: 2, shared: 1 }, "2 cited by a publication; 1 shown elsewhere"],
  ])("%o", (change, words) => {
    expect(toHoldings({ ...series, ...change })).toBe(words);
  });
});

describe("toRetentionWords", () => {
  it("tells of the setting", () => {
    expect(toRetentionWords(null)).toContain("for good");
    expect(toRetentionWords(400)).toContain("400 days after");
  });
});
