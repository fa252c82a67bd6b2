import { describe, expect, it } from "vitest";
import { type Capability, may, type Role, ROLES, tokenRoles } from "./roles";

/** The table of the product text, by hand: tester, analyst, reviewer, admin. */
const TABLE: Record<Capability, [boolean, boolean, boolean, boolean]> = {
  see: [true, true, true, true],
  capture: [true, true, false, false],
  analyse: [true, true, false, false],
  decide: [false, true, false, false],
  publish: [false, false, true, false],
  administer: [false, false, false, true],
};

describe("may", () => {
  it.each(Object.entries(TABLE))("%s follows the table for each role alone", (capability, row) => {
    expect(ROLES.map((role) => may([role], capability as Capability))).toEqual(row);
  });

  it.each(Object.keys(TABLE))("%s needs a role", (capability) => {
    expect(may([], capability as Capability)).toBe(false);
  });

  it("adds roles up", () => {
    const both: Role[] = ["admin", "tester"];
    const allowed = Object.keys(TABLE).filter((capability) => may(both, capability as Capability));
    expect(allowed).toEqual(["see", "capture", "analyse", "administer"]);
  });
});

describe("tokenRoles", () => {
  it.each<[Role[], Role[], Role[]]>([
    [["tester"], ["tester", "admin"], ["tester"]],
    [["tester", "admin"], ["tester"], ["tester"]],
    [["admin"], ["tester"], []],
    [
      ["admin", "tester"],
      ["admin", "tester"],
      ["tester", "admin"],
    ],
    [["tester"], [], []],
  ])("of %j for an owner with %j are %j", (given, now, rights) => {
    expect(tokenRoles(given, now)).toEqual(rights);
  });
});
