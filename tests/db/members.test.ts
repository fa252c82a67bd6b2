import { beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { findRoles, removeMember, setRoles } from "../../db/queries/members";
import { ALL_ROLES, type Lab, makeLab, makeMember, openDatabase } from "./support";

const bench = openDatabase();
let lab: Lab;

beforeAll(async () => {
  lab = await makeLab(bench, "people");
});

const act = (run: Parameters<typeof inLab<void>>[2]): Promise<void> =>
  inLab(bench.app, lab.admin, run);

describe("the last admin", () => {
  it("cannot lose the role", async () => {
    const losing = act((trx) => setRoles(trx, lab.id, lab.admin.accountId, ["tester"]));
    await expect(losing).rejects.toMatchObject({ code: "member.last-admin", status: 409 });
  });

  it("cannot be removed", async () => {
    const removing = act((trx) => removeMember(trx, lab.id, lab.admin.accountId));
    await expect(removing).rejects.toMatchObject({ code: "member.last-admin" });
    const roles = await inLab(bench.app, lab.admin, (trx) =>
      findRoles(trx, lab.id, lab.admin.accountId),
    );
    expect(roles).toEqual(ALL_ROLES);
  });

  it("may go once another has come, in one transaction and in any order", async () => {
    const next = await makeMember(bench, lab.id, "next@people.test", ["tester"]);
    await act(async (trx) => {
      await setRoles(trx, lab.id, lab.admin.accountId, ["tester"]);
      await setRoles(trx, lab.id, next.accountId, ["admin"]);
    });
    await act(async (trx) => {
      await setRoles(trx, lab.id, lab.admin.accountId, ALL_ROLES);
      await removeMember(trx, lab.id, next.accountId);
    });
    const roles = await inLab(bench.app, lab.admin, (trx) =>
      findRoles(trx, lab.id, next.accountId),
    );
    expect(roles).toEqual([]);
  });

  it("survives two admins who remove each other at the same moment", async () => {
    for (let round = 0; round < 5; round += 1) {
      const duel = await makeLab(bench, `duel-${round}`);
      const second = await makeMember(bench, duel.id, `second@duel-${round}.test`, ["admin"]);
      const outcomes = await Promise.allSettled([
        inLab(bench.app, duel.admin, (trx) => removeMember(trx, duel.id, second.accountId)),
        inLab(bench.app, second, (trx) => removeMember(trx, duel.id, duel.admin.accountId)),
      ]);
      expect(outcomes.map((outcome) => outcome.status).toSorted()).toEqual([
        "fulfilled",
        "rejected",
      ]);
    }
  });
});

describe("roles", () => {
  it.each([[[]], [["owner"]]])("are never %j", async (roles) => {
    const setting = act((trx) =>
      setRoles(trx, lab.id, lab.admin.accountId, roles as unknown as typeof ALL_ROLES),
    );
    await expect(setting).rejects.toThrow(/memberships_roles_check/);
  });
});
