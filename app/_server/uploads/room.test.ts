import { describe, expect, it } from "vitest";
import { requireRoom, RESERVE_BYTES } from "./room";

describe("requireRoom", () => {
  it("lets through what leaves the reserve", () => {
    expect(() => requireRoom(RESERVE_BYTES + 10, 10)).not.toThrow();
  });

  it.each([
    [RESERVE_BYTES + 9, 10, "0 MB can still be taken, this needs 1 MB"],
    [RESERVE_BYTES + 100_000_000, 400_000_000, "100 MB can still be taken, this needs 400 MB"],
    [0, 1_000_000, "0 MB can still be taken, this needs 1 MB"],
  ])("refuses with the figures: %d free, %d needed", (free, needed, words) => {
    expect(() => requireRoom(free, needed)).toThrow(
      expect.objectContaining({
        code: "storage.full",
        status: 507,
        message: expect.stringContaining(words) as string,
        details: { free_bytes: free, needed_bytes: needed, reserve_bytes: RESERVE_BYTES },
      }) as Error,
    );
  });
});
