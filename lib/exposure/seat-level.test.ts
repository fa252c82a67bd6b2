import { describe, expect, it } from "vitest";
import { computeSeatLevelDbA, type Seat } from "./seat-level";

const AT_ONE_METRE: Seat = {
  levelAt1mDbA: 91,
  turnedDownDb: 0,
  distanceM: 1,
  room: "outdoors",
  pair: false,
};

/** docs/domain.md section 9: L_1m - turned down + 10 lg(1/d^2 + 1/r^2), + 3 dB for a pair. */
const ROWS: { name: string; seat: Partial<Seat>; expected: number }[] = [
  { name: "outdoors at 1 m nothing changes", seat: {}, expected: 91 },
  { name: "outdoors at 10 m, 20 dB less", seat: { distanceM: 10 }, expected: 71 },
  { name: "a live room at its radius, twice the power", seat: { room: "live" }, expected: 94.0103 },
  {
    name: "3 m, pair, live room, 6 dB down",
    seat: { distanceM: 3, room: "live", pair: true, turnedDownDb: 6 },
    expected: 88.4576,
  },
  { name: "3 m in a small room", seat: { distanceM: 3, room: "small" }, expected: 95.6073 },
  { name: "3 m in a large room", seat: { distanceM: 3, room: "large" }, expected: 86.5767 },
];

describe("computeSeatLevelDbA", () => {
  it.each(ROWS)("$name", ({ seat, expected }) => {
    expect(computeSeatLevelDbA({ ...AT_ONE_METRE, ...seat })).toBeCloseTo(expected, 3);
  });

  it("refuses a distance of nothing", () => {
    expect(() => computeSeatLevelDbA({ ...AT_ONE_METRE, distanceM: 0 })).toThrow("0 m");
  });
});
