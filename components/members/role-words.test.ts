import { describe, expect, it } from "vitest";
import { ROLES } from "@/lib/roles/roles";
import { findOnlyAdmin, ROLE_SENTENCES, sameRoles, toMembersLine } from "./role-words";

describe("findOnlyAdmin", () => {
  it.each([
    [
      "one of two",
      [
        { id: "a", roles: ["admin"] },
        { id: "b", roles: ["tester"] },
      ],
      "a",
    ],
    [
      "two admins",
      [
        { id: "a", roles: ["admin"] },
        { id: "b", roles: ["tester", "admin"] },
      ],
      null,
    ],
    ["nobody", [], null],
  ] as const)("%s", (_name, members, expected) => {
    expect(findOnlyAdmin(members)).toBe(expected);
  });
});

describe("sameRoles", () => {
  it.each([
    [["tester", "admin"], ["admin", "tester"], true],
    [["tester"], ["tester", "admin"], false],
    [["tester", "admin"], ["tester", "analyst"], false],
  ] as const)("%o and %o: %s", (a, b, expected) => {
    expect(sameRoles(a, b)).toBe(expected);
  });
});

it.each([
  [1, 0, "1 person"],
  [3, 1, "3 people, 1 open invitation"],
  [12, 2, "12 people, 2 open invitations"],
])("%i and %i: %s", (people, invitations, expected) => {
  expect(toMembersLine(people, invitations)).toBe(expected);
});

it("has one sentence for each role", () => {
  expect(Object.keys(ROLE_SENTENCES)).toEqual([...ROLES]);
  for (const sentence of Object.values(ROLE_SENTENCES)) expect(sentence).toMatch(/^[A-Z].*\.$/);
});
