/** Who is calling: what takes effect at the next request. */
import { sql } from "kysely";
import { beforeAll, describe, expect, it } from "vitest";
import { GET as getLab, PATCH as patchLab } from "../../../app/api/v1/lab/route";
import { DELETE as removeMember } from "../../../app/api/v1/members/[accountId]/route";
import { PUT as putRoles } from "../../../app/api/v1/members/[accountId]/roles/route";
import { GET as getSession } from "../../../app/api/v1/session/route";
import { PUT as putLab } from "../../../app/api/v1/session/lab/route";
import { DELETE as revokeToken } from "../../../app/api/v1/tokens/[tokenId]/route";
import { GET as listTokens, POST as createToken } from "../../../app/api/v1/tokens/route";
import { signOut } from "../../../app/_server/sign-in";
import { inLab } from "../../../db/in-lab";
import { addMember } from "../../../db/queries/members";
import type { SessionView } from "../../../lib/api/session";
import { ALL_ROLES, type Lab, makeLab, makeMember } from "../../db/support";
import { call, problemCode, openServer, openSession, openToken, toCookie } from "./server";

const bench = openServer();
let own: Lab;
let other: Lab;

beforeAll(async () => {
  own = await makeLab(bench, "own");
  other = await makeLab(bench, "other");
});

const newMember = (name: string, roles = ALL_ROLES) =>
  makeMember(bench, own.id, `${name}@own.test`, roles);

describe("nobody", () => {
  it.each([
    ["no credentials", {}, "auth.required"],
    ["a cookie of somebody else's making", { cookie: "tidemark-session=abc" }, "auth.required"],
    ["an unknown token", { authorization: "Bearer tdm_unknown" }, "auth.token-invalid"],
    ["another scheme", { authorization: "Basic YTpi" }, "auth.token-invalid"],
  ])("gets in with %s", async (_name, who, code) => {
    expect(problemCode(await call(getLab, "GET", who))).toBe(code);
    expect(problemCode(await call(getSession, "GET", who))).toBe(code);
  });

  it("gets in with a session id that never was", async () => {
    const who = await toCookie(bench, "00000000-0000-4000-8000-000000000000");
    expect(problemCode(await call(getLab, "GET", who))).toBe("auth.required");
  });

  it("is told apart by a bad token even with a good cookie", async () => {
    const session = await openSession(bench, own.admin);
    const who = { ...session, authorization: "Bearer tdm_bad" };
    expect(problemCode(await call(getLab, "GET", who))).toBe("auth.token-invalid");
  });
});

describe("a session", () => {
  it("says who, where and with which roles", async () => {
    const answer = await call(getSession, "GET", await openSession(bench, own.admin));
    expect(answer.status).toBe(200);
    expect(answer.headers.get("cache-control")).toBe("no-store");
    expect(answer.body).toMatchObject({
      account: { email: "admin@own.test", theme: "system" },
      lab: { slug: "own", settings: { two_person_rule: true } },
      roles: ALL_ROLES,
      via: "session",
    });
  });

  it("ends with the sign-out", async () => {
    const member = await newMember("leaver");
    const [gone, kept] = [await openSession(bench, member), await openSession(bench, member)];
    await signOut(bench.app, gone.sessionId);
    expect(problemCode(await call(getLab, "GET", gone))).toBe("auth.required");
    expect((await call(getLab, "GET", kept)).status).toBe(200);
  });

  it("ends when its time is over or the account is disabled", async () => {
    const member = await newMember("old");
    const session = await openSession(bench, member);
    const change = (statement: ReturnType<typeof sql>) =>
      inLab(bench.app, member, (trx) => statement.execute(trx));
    await change(sql`update sessions set expires_at = now() where id = ${session.sessionId}`);
    expect(problemCode(await call(getLab, "GET", session))).toBe("auth.required");
    const next = await openSession(bench, member);
    expect((await call(getLab, "GET", next)).status).toBe(200);
    const pg = await import("pg");
    const client = new pg.default.Client({
      connectionString: bench.database.connectionString("superuser"),
    });
    await client.connect();
    await client.query("update accounts set disabled_at = now() where id = $1", [member.accountId]);
    await client.end();
    expect(problemCode(await call(getLab, "GET", next))).toBe("auth.required");
  });

  it("loses a role at once", async () => {
    const admin = await openSession(bench, own.admin);
    const member = await newMember("demoted");
    const session = await openSession(bench, member);
    const rename = () => call(patchLab, "PATCH", session, { body: { name: "Lab own" } });
    expect((await rename()).status).toBe(200);
    const changed = await call(putRoles, "PUT", admin, {
      params: { accountId: member.accountId },
      body: { roles: ["tester"] },
    });
    expect(changed.body).toMatchObject({ roles: ["tester"] });
    expect(problemCode(await rename())).toBe("auth.forbidden");
    expect((await call(getLab, "GET", session)).status).toBe(200);
  });

  it("loses the lab at once with the membership, and finds the way to another", async () => {
    const member = await newMember("removed");
    await inLab(bench.app, { labId: other.id, accountId: member.accountId }, (trx) =>
      addMember(trx, { labId: other.id, accountId: member.accountId, roles: ["reviewer"] }),
    );
    const session = await openSession(bench, member);
    const token = await openToken(bench, member, ["tester"]);
    const admin = await openSession(bench, own.admin);
    const removed = await call(removeMember, "DELETE", admin, {
      params: { accountId: member.accountId },
    });
    expect(removed).toMatchObject({ status: 204, body: null });
    expect(problemCode(await call(getLab, "GET", session))).toBe("auth.forbidden");
    expect(problemCode(await call(getLab, "GET", token))).toBe("auth.forbidden");
    const view = (await call(getSession, "GET", session)).body as SessionView;
    expect(view).toMatchObject({ lab: null, roles: [], labs: [{ slug: "other" }] });
    const switched = await call(putLab, "PUT", session, { body: { lab_id: other.id } });
    expect(switched.body).toMatchObject({ lab: { slug: "other" }, roles: ["reviewer"] });
  });

  it("does not enter a lab of others", async () => {
    const session = await openSession(bench, own.admin);
    expect(problemCode(await call(putLab, "PUT", session, { body: { lab_id: other.id } }))).toBe(
      "not-found",
    );
    const view = (await call(getSession, "GET", session)).body;
    expect(view).toMatchObject({ lab: { slug: "own" } });
  });

  it.each([
    ["another site", "https://evil.test"],
    ["a page without origin", undefined],
    ["a sandboxed page", "null"],
    ["our name as the start of another", "http://lab.test.evil.test"],
  ])("does not write for %s", async (_name, origin) => {
    const session = await openSession(bench, own.admin);
    const who: Record<string, string> = { cookie: session.cookie ?? "" };
    if (origin !== undefined) who["origin"] = origin;
    expect(problemCode(await call(patchLab, "PATCH", who, { body: { name: "Taken" } }))).toBe(
      "request.origin",
    );
    expect((await call(getLab, "GET", who)).body).toMatchObject({ name: "Lab own" });
  });
});

describe("a token", () => {
  it("has what it was given as far as its owner has it now", async () => {
    const member = await newMember("scripter", ["tester", "admin"]);
    const token = await openToken(bench, member, ["admin", "reviewer"]);
    const seen = async () => ((await call(getSession, "GET", token)).body as SessionView).roles;
    expect(await seen()).toEqual(["admin"]);
    expect((await call(patchLab, "PATCH", token, { body: { time_zone: "UTC" } })).status).toBe(200);
    const admin = await openSession(bench, own.admin);
    await call(putRoles, "PUT", admin, {
      params: { accountId: member.accountId },
      body: { roles: ["tester", "reviewer"] },
    });
    expect(await seen()).toEqual(["reviewer"]);
    expect(problemCode(await call(patchLab, "PATCH", token, { body: { time_zone: "UTC" } }))).toBe(
      "auth.forbidden",
    );
  });

  it("ends when revoked or expired", async () => {
    const member = await newMember("revoker");
    const revoked = await openToken(bench, member, ["tester"]);
    const done = await call(revokeToken, "DELETE", await openSession(bench, member), {
      params: { tokenId: revoked.tokenId },
    });
    expect(done.status).toBe(204);
    expect(problemCode(await call(getLab, "GET", revoked))).toBe("auth.token-invalid");
    const expired = await openToken(bench, member, ["tester"], new Date(Date.now() - 1000));
    expect(problemCode(await call(getLab, "GET", expired))).toBe("auth.token-invalid");
  });

  it("is shown once, stored as a digest, and bound to the roles of its maker", async () => {
    const member = await newMember("maker", ["tester"]);
    const session = await openSession(bench, member);
    const made = await call(createToken, "POST", session, {
      body: { name: "bench 1", roles: ["tester"] },
    });
    expect(made.status).toBe(201);
    const { token, row } = made.body as { token: string; row: { prefix: string } };
    expect(token.startsWith(row.prefix)).toBe(true);
    expect((await call(getLab, "GET", { authorization: `Bearer ${token}` })).status).toBe(200);
    const listed = await call(listTokens, "GET", session);
    expect(listed.body).toMatchObject({
      tokens: [{ name: "bench 1", owner: { name: "maker@own.test" } }],
    });
    expect(JSON.stringify(listed.body)).not.toContain(token);
    const stored = await inLab(bench.app, member, (trx) =>
      trx.selectFrom("api_tokens").selectAll().execute(),
    );
    expect(JSON.stringify(stored)).not.toContain(token);
    const refused = await call(createToken, "POST", session, {
      body: { name: "more", roles: ["tester", "admin"] },
    });
    expect(problemCode(refused)).toBe("request.invalid");
    expect(refused.body).toMatchObject({ errors: [{ path: "roles" }] });
  });

  it("makes no tokens, changes no account and revokes nobody else's", async () => {
    const token = await openToken(bench, own.admin, ALL_ROLES);
    expect(
      problemCode(
        await call(createToken, "POST", token, { body: { name: "child", roles: ["tester"] } }),
      ),
    ).toBe("auth.session-needed");
    const plain = await openSession(bench, await newMember("plain", ["analyst"]));
    expect(
      problemCode(await call(revokeToken, "DELETE", plain, { params: { tokenId: token.tokenId } })),
    ).toBe("not-found");
    const foreign = await openSession(bench, other.admin);
    expect(
      problemCode(
        await call(revokeToken, "DELETE", foreign, { params: { tokenId: token.tokenId } }),
      ),
    ).toBe("not-found");
    expect((await call(getLab, "GET", token)).status).toBe(200);
  });
});
