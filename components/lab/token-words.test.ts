import { describe, expect, it } from "vitest";
import { toTokenRights, toTokenState } from "./token-words";

const now = new Date("2026-05-12T10:00:00Z");

it.each([
  [{ expires_at: null, revoked_at: null }, "in use"],
  [{ expires_at: "2026-05-12T10:00:01.000Z", revoked_at: null }, "in use"],
  [{ expires_at: "2026-05-12T10:00:00.000Z", revoked_at: null }, "expired"],
  [{ expires_at: "2026-05-01T00:00:00.000Z", revoked_at: "2026-04-01T00:00:00.000Z" }, "revoked"],
] as const)("toTokenState %o", (token, expected) => {
  expect(toTokenState(token, now)).toBe(expected);
});

describe("toTokenRights", () => {
  it.each([
    [["tester", "admin"], ["tester", "analyst"], ["tester"], ["admin"]],
    [["tester"], [], [], ["tester"]],
    [["analyst"], ["analyst", "admin"], ["analyst"], []],
  ] as const)("given %o, owner %o", (given, owner, counts, asleep) => {
    expect(toTokenRights(given, owner)).toEqual({ counts, asleep });
  });
});
