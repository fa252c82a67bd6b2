/** Signing in, and what an account changes of itself. */
import { beforeAll, describe, expect, it } from "vitest";
import { PUT as putPassword } from "../../../app/api/v1/account/password/route";
import { PATCH as patchAccount } from "../../../app/api/v1/account/route";
import { DELETE as endSession } from "../../../app/api/v1/account/sessions/[sessionId]/route";
import { GET as listSessions } from "../../../app/api/v1/account/sessions/route";
import { GET as getLab } from "../../../app/api/v1/lab/route";
import { createAttempts, TRIES_PER_ADDRESS } from "../../../app/_server/attempts";
import { getPool } from "../../../app/_server/database";
import { signIn } from "../../../app/_server/sign-in";
import { hashPassword } from "../../../lib/account/passwords";
import { type Lab, makeLab, makeMember } from "../../db/support";
import { call, problemCode, openServer, openSession } from "./server";

const bench = openServer();
const PASSWORD = "correct horse battery";
let own: Lab;

beforeAll(async () => {
  own = await makeLab(bench, "own");
});

const attempt = (email: string, password: string) =>
  signIn(bench.app, createAttempts(getPool()), {
    email,
    password,
    ip: "192.0.2.7",
    userAgent: "t",
  });

describe("signing in", () => {
  it("says how many tries are left, then refuses even the right password for a while", async () => {
    const email = "tried@own.test";
    await makeMember(bench, own.id, email, ["tester"], await hashPassword(PASSWORD));
    for (let left = TRIES_PER_ADDRESS - 1; left >= 0; left -= 1) {
      await expect(attempt(email, "wrong password")).rejects.toMatchObject({
        code: "auth.wrong",
        details: { triesLeft: left },
      });
    }
    const refused = await attempt(email, PASSWORD).catch((error: unknown) => error);
    expect(refused).toMatchObject({ code: "auth.rate-limited", status: 429 });
    const { retryAfterS } = (refused as { details: { retryAfterS: number } }).details;
    expect(retryAfterS).toBeGreaterThan(14 * 60);
    expect(retryAfterS).toBeLessThanOrEqual(15 * 60);
  });

  it("counts tries that come at the same moment", async () => {
    const tries = await Promise.allSettled(
      Array.from({ length: TRIES_PER_ADDRESS + 4 }, () => attempt("crowd@own.test", "wrong one")),
    );
    const codes = tries.map((outcome) =>
      outcome.status === "rejected" ? (outcome.reason as { code: string }).code : "in",
    );
    expect(codes.filter((code) => code === "auth.wrong")).toHaveLength(TRIES_PER_ADDRESS);
    expect(codes.filter((code) => code === "auth.rate-limited")).toHaveLength(4);
  });

  it("answers an unknown address like a wrong password", async () => {
    const unknown = await attempt("nobody@own.test", PASSWORD).catch((error: unknown) => error);
    expect(unknown).toMatchObject({ code: "auth.wrong", message: "Address or password is wrong." });
  });

  it("forgets the tries after the right password", async () => {
    const email = "forgiven@own.test";
    await makeMember(bench, own.id, email, ["tester"], await hashPassword(PASSWORD));
    await attempt(email, "wrong password").catch(() => undefined);
    await attempt(email, PASSWORD);
    await expect(attempt(email, "wrong password")).rejects.toMatchObject({
      details: { triesLeft: TRIES_PER_ADDRESS - 1 },
    });
  });

  it("keeps no address in its counters", async () => {
    const keys = await bench.app.selectFrom("rate_limits").select("key").execute();
    expect(keys.length).toBeGreaterThan(1);
    expect(keys.filter(({ key }) => /@|192\.0\.2/.test(key))).toEqual([]);
  });

  it("lets nobody in uncounted where the database is away", async () => {
    const { default: pg } = await import("pg");
    const away = new pg.Pool({ connectionString: "postgres://x:y@127.0.0.1:1/z" });
    const { count } = createAttempts(away);
    await expect(count("a@b.test", "192.0.2.1")).rejects.toMatchObject({
      code: "database.unavailable",
    });
    await away.end();
  });
});

describe("the account", () => {
  it("changes its password, ends its other sessions and keeps this one", async () => {
    const email = "changer@own.test";
    const member = await makeMember(bench, own.id, email, ["tester"], await hashPassword(PASSWORD));
    const [here, there] = [await openSession(bench, member), await openSession(bench, member)];
    const change = (current: string, next: string) =>
      call(putPassword, "PUT", here, { body: { current, next } });
    expect(problemCode(await change("not my password", "another long one"))).toBe("auth.wrong");
    expect(problemCode(await change(PASSWORD, "short"))).toBe("password.weak");
    expect((await change(PASSWORD, "another long one")).body).toEqual({ ended_sessions: 1 });
    expect((await call(getLab, "GET", here)).status).toBe(200);
    expect(problemCode(await call(getLab, "GET", there))).toBe("auth.required");
    await expect(attempt(email, PASSWORD)).rejects.toMatchObject({ code: "auth.wrong" });
    await attempt(email, "another long one");
  });

  it("lists its sessions and ends one, but none of somebody else's", async () => {
    const member = await makeMember(bench, own.id, "sessions@own.test", ["tester"]);
    const [here, there] = [await openSession(bench, member), await openSession(bench, member)];
    const listed = (await call(listSessions, "GET", here)).body as {
      sessions: { id: string; current: boolean }[];
    };
    expect(listed.sessions.map((session) => session.current).filter(Boolean)).toHaveLength(1);
    expect(listed.sessions).toHaveLength(2);
    const end = (sessionId: string) => call(endSession, "DELETE", here, { params: { sessionId } });
    expect((await end(there.sessionId)).status).toBe(204);
    expect(problemCode(await call(getLab, "GET", there))).toBe("auth.required");
    const others = await openSession(bench, own.admin);
    expect(problemCode(await end(others.sessionId))).toBe("not-found");
    expect((await call(getLab, "GET", others)).status).toBe(200);
  });

  it("changes name and theme", async () => {
    const member = await makeMember(bench, own.id, "named@own.test", ["tester"]);
    const session = await openSession(bench, member);
    const body = { name: "Ned", theme: "dark" };
    const answer = await call(patchAccount, "PATCH", session, { body });
    expect(answer.body).toMatchObject({ account: body });
  });
});
