/** Members, invitations and the lab. */
import { beforeAll, describe, expect, it } from "vitest";
import { DELETE as withdraw } from "../../../app/api/v1/invitations/[invitationId]/route";
import { POST as accept } from "../../../app/api/v1/invitations/accept/route";
import { POST as look } from "../../../app/api/v1/invitations/look/route";
import { GET as listInvitations, POST as invite } from "../../../app/api/v1/invitations/route";
import { GET as getLab, PATCH as patchLab } from "../../../app/api/v1/lab/route";
import { DELETE as removeMember } from "../../../app/api/v1/members/[accountId]/route";
import { PUT as putRoles } from "../../../app/api/v1/members/[accountId]/roles/route";
import { GET as listMembers } from "../../../app/api/v1/members/route";
import { POST as createToken } from "../../../app/api/v1/tokens/route";
import { GET as listTrail } from "../../../app/api/v1/trail/route";
import { createAttempts, TRIES_PER_ADDRESS } from "../../../app/_server/attempts";
import { getPool } from "../../../app/_server/database";
import { signIn } from "../../../app/_server/sign-in";
import { inLab } from "../../../db/in-lab";
import { hashPassword } from "../../../lib/account/passwords";
import type { Lab as LabAnswer, TrailEvent } from "../../../lib/api/labs";
import { TRAIL_ABOUT } from "../../../lib/labs/trail-about";
import { createLab, inviteToLab } from "../../../scripts/labs/labs";
import { type Lab, makeLab, makeMember } from "../../db/support";
import { call, type Credentials, problemCode, openServer, openSession, PUBLIC_URL } from "./server";

const bench = openServer();
const PASSWORD = "correct horse battery";
let own: Lab;
let other: Lab;
let admin: Credentials;

beforeAll(async () => {
  own = await makeLab(bench, "own");
  other = await makeLab(bench, "other");
  admin = await openSession(bench, own.admin);
});

const attempt = (email: string, password: string) =>
  signIn(bench.app, createAttempts(getPool()), {
    email,
    password,
    ip: "192.0.2.7",
    userAgent: "t",
  });

const toSecret = (link: string): string => link.slice(`${PUBLIC_URL}/invitation/`.length);

async function inviteSomebody(email: string, roles: string[], name = ""): Promise<string> {
  const answer = await call(invite, "POST", admin, { body: { email, name, roles } });
  expect(answer.status).toBe(201);
  return toSecret((answer.body as { link: string }).link);
}

describe("an invitation", () => {
  it("leads from the link to a member who can sign in", async () => {
    const secret = await inviteSomebody("New@Own.test", ["analyst", "tester"], "Nell New");
    const seen = await call(look, "POST", {}, { body: { secret } });
    expect(seen.body).toEqual({
      lab: "Lab own",
      email: "new@own.test",
      name: "Nell New",
      roles: ["tester", "analyst"],
      account_exists: false,
    });
    const joined = await call(accept, "POST", {}, { body: { secret, password: PASSWORD } });
    expect(joined).toMatchObject({ status: 200, body: { email: "new@own.test", lab: "Lab own" } });
    const { accountId } = await attempt("NEW@own.test", PASSWORD);
    const members = await call(listMembers, "GET", admin);
    expect(members.body).toMatchObject({
      members: expect.arrayContaining([
        expect.objectContaining({ id: accountId, name: "Nell New", roles: ["tester", "analyst"] }),
      ]) as unknown,
    });
  });

  it("is good for one use, also when tried twice at once", async () => {
    const secret = await inviteSomebody("once@own.test", ["tester"]);
    const tries = await Promise.all(
      [1, 2].map(() => call(accept, "POST", {}, { body: { secret, password: PASSWORD } })),
    );
    expect(tries.map((answer) => answer.status).toSorted((a, b) => a - b)[0]).toBe(200);
    expect(tries.filter((answer) => answer.status === 200)).toHaveLength(1);
    expect(problemCode(await call(look, "POST", {}, { body: { secret } }))).toBe(
      "invitation.invalid",
    );
  });

  it("asks an existing account for its own password", async () => {
    await makeMember(
      bench,
      other.id,
      "both@other.test",
      ["reviewer"],
      await hashPassword(PASSWORD),
    );
    const secret = await inviteSomebody("both@other.test", ["analyst"]);
    const seen = await call(look, "POST", {}, { body: { secret } });
    expect(seen.body).toMatchObject({ account_exists: true });
    const wrong = await call(
      accept,
      "POST",
      {},
      { body: { secret, password: "another password" } },
    );
    expect(problemCode(wrong)).toBe("auth.wrong");
    expect(wrong.body).toMatchObject({ details: { triesLeft: TRIES_PER_ADDRESS - 1 } });
    const right = await call(accept, "POST", {}, { body: { secret, password: PASSWORD } });
    expect(right.status).toBe(200);
  });

  it("refuses a weak password and stays good", async () => {
    const secret = await inviteSomebody("weak@own.test", ["tester"]);
    const weak = await call(accept, "POST", {}, { body: { secret, password: "short" } });
    expect(problemCode(weak)).toBe("password.weak");
    expect((await call(look, "POST", {}, { body: { secret } })).status).toBe(200);
  });

  it("is listed without its secret and can be withdrawn, by its own lab alone", async () => {
    const secret = await inviteSomebody("gone@own.test", ["tester"]);
    const listed = (await call(listInvitations, "GET", admin)).body as {
      invitations: { id: string; email: string }[];
    };
    expect(JSON.stringify(listed)).not.toContain(secret);
    const id = listed.invitations.find((one) => one.email === "gone@own.test")?.id ?? "";
    const stranger = await openSession(bench, other.admin);
    const foreign = await call(withdraw, "DELETE", stranger, { params: { invitationId: id } });
    expect(problemCode(foreign)).toBe("not-found");
    const done = await call(withdraw, "DELETE", admin, { params: { invitationId: id } });
    expect(done.status).toBe(204);
    expect(problemCode(await call(look, "POST", {}, { body: { secret } }))).toBe(
      "invitation.invalid",
    );
  });

  it.each([
    [{ email: "x", roles: ["tester"] }, "email"],
    [{ email: "x@y.test", roles: [] }, "roles"],
    [{ email: "x@y.test", roles: ["owner"] }, "roles.0"],
    [{ email: "x@y.test", roles: ["tester"], more: 1 }, ""],
  ])("of %j is refused with its field", async (body, path) => {
    const answer = await call(invite, "POST", admin, { body });
    expect(problemCode(answer)).toBe("request.invalid");
    expect(answer.body).toMatchObject({ errors: [expect.objectContaining({ path })] });
  });

  it("to a member is refused", async () => {
    const body = { email: "admin@own.test", roles: ["tester"] };
    expect(problemCode(await call(invite, "POST", admin, { body }))).toBe("conflict.exists");
  });
});

describe("members", () => {
  it("keep a last admin, over the API too", async () => {
    const lonely = await makeLab(bench, "lonely");
    const session = await openSession(bench, lonely.admin);
    const params = { accountId: lonely.admin.accountId };
    const demoted = await call(putRoles, "PUT", session, { params, body: { roles: ["tester"] } });
    expect(problemCode(demoted)).toBe("member.last-admin");
    expect(problemCode(await call(removeMember, "DELETE", session, { params }))).toBe(
      "member.last-admin",
    );
    expect((await call(getLab, "GET", session)).status).toBe(200);
  });

  it("of another lab do not exist", async () => {
    const params = { accountId: other.admin.accountId };
    const body = { roles: ["tester"] };
    expect(problemCode(await call(putRoles, "PUT", admin, { params, body }))).toBe("not-found");
    expect(problemCode(await call(removeMember, "DELETE", admin, { params }))).toBe("not-found");
  });

  it.each(["tester", "analyst", "reviewer"] as const)(
    "without admin administer nothing: %s",
    async (role) => {
      const member = await makeMember(bench, own.id, `${role}@own.test`, [role]);
      const session = await openSession(bench, member);
      const params = { accountId: member.accountId };
      const tried = [
        await call(putRoles, "PUT", session, { params, body: { roles: ["admin"] } }),
        await call(removeMember, "DELETE", session, { params }),
        await call(listInvitations, "GET", session),
        await call(invite, "POST", session, { body: { email: "a@b.test", roles: ["admin"] } }),
        await call(patchLab, "PATCH", session, { body: { name: "x" } }),
        await call(listTrail, "GET", session),
      ];
      for (const answer of tried) expect(problemCode(answer)).toBe("auth.forbidden");
      expect((await call(listMembers, "GET", session)).status).toBe(200);
    },
  );
});

describe("the lab", () => {
  it("takes name, time zone and settings, and says so in the trail", async () => {
    const body = {
      time_zone: "Europe/Helsinki",
      settings: { two_person_rule: false, exposure_rule: "eu" },
    };
    const changed = await call(patchLab, "PATCH", admin, { body });
    expect(changed.body).toMatchObject({
      time_zone: "Europe/Helsinki",
      settings: { two_person_rule: false, exposure_rule: "eu", retention_days: null },
    });
    const trail = (await call(listTrail, "GET", admin, { query: "?page_size=1" })).body as {
      events: TrailEvent[];
      more: boolean;
    };
    expect(trail.more).toBe(true);
    expect(trail.events).toMatchObject([{ act: "lab.changed", who: { name: "admin@own.test" } }]);
  });

  it.each([
    [{ time_zone: "Mars/Olympus" }, "time_zone"],
    [
      { settings: { arrival: { level_warn_dB: 3, level_fail_dB: 1 } } },
      "settings.arrival.level_warn_dB",
    ],
    [{ settings: { unknown: 1 } }, "settings"],
  ])("refuses %j", async (body, path) => {
    const answer = await call(patchLab, "PATCH", admin, { body });
    expect(problemCode(answer)).toBe("request.invalid");
    expect(answer.body).toMatchObject({ errors: [{ path }] });
  });

  it("refuses a change over one that the caller has not seen, and leaves the trail alone", async () => {
    const seen = (await call(getLab, "GET", admin)).body as LabAnswer;
    const { name, time_zone, settings } = seen;
    const was = { name, time_zone, settings };
    const first = await call(patchLab, "PATCH", admin, { body: { name: "Own A", was } });
    expect(first.body).toEqual({ ...seen, name: "Own A" });
    const late = await call(patchLab, "PATCH", admin, { body: { name: "Own B", was } });
    expect(late.status).toBe(409);
    expect(problemCode(late)).toBe("conflict.changed");
    const onTop = await call(patchLab, "PATCH", admin, {
      body: { name: "Own B", was: { ...was, name: "Own A" } },
    });
    expect(onTop.body).toEqual({ ...seen, name: "Own B" });
    const trail = (await call(listTrail, "GET", admin, { query: "?about=lab&page_size=2" })).body;
    expect(trail).toMatchObject({
      events: [{ details: { name: "Own B" } }, { details: { name: "Own A" } }],
    });
  });

  it("tells each kind of event apart, and leaves none out", async () => {
    const body = { name: "bench", roles: ["admin"] };
    expect((await call(createToken, "POST", admin, { body })).status).toBe(201);
    const actsOf = async (query: string): Promise<string[]> => {
      const answer = await call(listTrail, "GET", admin, { query: `?page_size=100${query}` });
      const { events, more } = answer.body as { events: TrailEvent[]; more: boolean };
      expect(more).toBe(false);
      return events.map((event) => event.act);
    };
    const all = await actsOf("");
    const kinds = await Promise.all(TRAIL_ABOUT.map((about) => actsOf(`&about=${about}`)));
    expect(kinds.flat().toSorted()).toEqual(all.toSorted());
    const rooms = kinds.map((acts) =>
      [...new Set(acts.map((act) => act.split(".")[0]))].toSorted((a, b) =>
        (a ?? "").localeCompare(b ?? ""),
      ),
    );
    expect(rooms.slice(0, 4)).toEqual([["account"], ["invitation", "member"], ["token"], ["lab"]]);
    const refused = await call(listTrail, "GET", admin, { query: "?about=weather" });
    expect(problemCode(refused)).toBe("request.invalid");
  });

  it("shows its own trail and no other lab's", async () => {
    const stranger = await openSession(bench, other.admin);
    const trail = (await call(listTrail, "GET", stranger)).body as { events: TrailEvent[] };
    const subjects = trail.events.map((event) => event.subject_id);
    expect(subjects).not.toContain(own.id);
    const page = await call(listTrail, "GET", admin, { query: "?page_size=100" });
    const acts = (page.body as { events: TrailEvent[] }).events.map((event) => event.act);
    for (const act of ["account.signed-in", "invitation.created", "member.joined"]) {
      expect(acts).toContain(act);
    }
  });
});

describe("a lab from the terminal", () => {
  const databases = () => ({ owner: bench.owner, app: bench.app, publicUrl: PUBLIC_URL });

  it("stands with a link for its first admin", async () => {
    const link = await createLab(databases(), {
      slug: "fen",
      name: "Fen Acoustics",
      adminEmail: "Ada@fen.test",
      timeZone: "Europe/Helsinki",
    });
    const body = { secret: toSecret(link), name: "Ada Fen", password: PASSWORD };
    expect((await call(accept, "POST", {}, { body })).status).toBe(200);
    const { accountId } = await attempt("ada@fen.test", PASSWORD);
    const row = await bench.owner
      .selectFrom("labs")
      .select(["id", "time_zone"])
      .where("slug", "=", "fen")
      .executeTakeFirstOrThrow();
    expect(row.time_zone).toBe("Europe/Helsinki");
    const session = await openSession(bench, { labId: row.id, accountId });
    expect((await call(listMembers, "GET", session)).body).toMatchObject({
      members: [{ name: "Ada Fen", roles: ["admin"] }],
    });
    const again = await inviteToLab(databases(), {
      slug: "fen",
      email: "bo@fen.test",
      roles: ["tester", "admin"],
    });
    const seen = await call(look, "POST", {}, { body: { secret: toSecret(again) } });
    expect(seen.body).toMatchObject({ lab: "Fen Acoustics", roles: ["tester", "admin"] });
  });

  it.each([
    [{ name: "X", adminEmail: "a@b.test" }, "--slug is missing"],
    [{ slug: "A b", name: "X", adminEmail: "a@b.test" }, "small letters"],
    [{ slug: "x", name: "X" }, "--admin-email is missing"],
    [{ slug: "x", name: "X", adminEmail: "a@b.test", timeZone: "Nowhere" }, "time zone"],
    [{ slug: "own", name: "X", adminEmail: "a@b.test" }, 'There is a lab "own" already'],
  ])("%j is refused with the reason", async (given, why) => {
    await expect(createLab(databases(), given)).rejects.toThrow(why);
    const labs = await inLab(bench.app, own.admin, (trx) =>
      trx.selectFrom("labs").select("slug").execute(),
    );
    expect(labs).toEqual([{ slug: "own" }]);
  });
});
