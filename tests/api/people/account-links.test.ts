/** A forgotten password and a new address, by the links that a mail server received. */
import pino from "pino";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { POST as askAddress } from "../../../app/api/v1/account/address/route";
import {
  GET as getNotices,
  PATCH as patchNotices,
} from "../../../app/api/v1/account/notices/route";
import { POST as confirm } from "../../../app/api/v1/account-links/confirm-address/route";
import { POST as look } from "../../../app/api/v1/account-links/look/route";
import { DELETE as withdraw } from "../../../app/api/v1/invitations/[invitationId]/route";
import { GET as listInvitations, POST as invite } from "../../../app/api/v1/invitations/route";
import { POST as askReset } from "../../../app/api/v1/password-resets/route";
import { POST as useReset } from "../../../app/api/v1/password-resets/use/route";
import { GET as getSession } from "../../../app/api/v1/session/route";
import { GET as listTrail } from "../../../app/api/v1/trail/route";
import { createAttempts, TRIES_PER_ADDRESS } from "../../../app/_server/attempts";
import { getPool } from "../../../app/_server/database";
import { LINKS_PER_ADDRESS } from "../../../app/_server/mail-limit";
import { signIn } from "../../../app/_server/sign-in";
import { asAccount, inLab } from "../../../db/in-lab";
import { hashPassword } from "../../../lib/account/passwords";
import type { TrailEvent } from "../../../lib/api/labs";
import type { Invitation } from "../../../lib/api/members";
import { getEnvironment } from "../../../lib/config/environment";
import { LINK_PATHS } from "../../../lib/mail/compose";
import { openPost, type Post } from "../../../workers/post";
import { ALL_ROLES, type Lab, makeLab, makeMember } from "../../db/support";
import { type MailCatcher, openMailCatcher } from "../../support/mail-catcher";
import { call, openServer, openSession, problemCode, PUBLIC_URL } from "./server";

const bench = openServer();
const OLD = "correct horse battery";
const NEW = "another horse battery";
let own: Lab;
let catcher: MailCatcher;
let post: Post | null;

beforeAll(async () => {
  own = await makeLab(bench, "own");
  catcher = await openMailCatcher();
  process.env["TIDEMARK_SMTP_URL"] = catcher.url;
  post = await openPost(getEnvironment(), bench.app, pino({ level: "silent" }), 50);
});
afterAll(async () => {
  post?.stop();
  await post?.close();
  await catcher.close();
});

const member = async (name: string, roles = ALL_ROLES) =>
  makeMember(bench, own.id, `${name}@own.test`, roles, await hashPassword(OLD));

const attempt = (email: string, password: string) =>
  signIn(bench.app, createAttempts(getPool()), {
    email,
    password,
    ip: "192.0.2.7",
    userAgent: "t",
  });

/** The secret of the newest link of its kind in the mail. */
async function secretFor(to: string, kind: keyof typeof LINK_PATHS, subject: string) {
  const { text } = await catcher.waitFor(to, subject);
  const found = new RegExp(`${PUBLIC_URL}${LINK_PATHS[kind]}(\\S{43})\n`).exec(text);
  return found?.[1] ?? "";
}

const ask = (email: string) => call(askReset, "POST", {}, { body: { email } });
const resetSecret = (to: string) => secretFor(to, "password-reset", "Set a new password");

describe("a forgotten password", () => {
  it("is set anew by the link, once; every session ends", async () => {
    const who = await member("forgetful");
    const session = await openSession(bench, who);
    const asked = await ask("Forgetful@own.test");
    expect(asked).toMatchObject({ status: 202, body: null });
    const secret = await resetSecret("forgetful@own.test");
    // Looking does not use it: a mail scanner opens every link.
    for (const _ of [1, 2]) {
      const seen = await call(look, "POST", {}, { body: { secret } });
      expect(seen.body).toEqual({
        purpose: "reset-password",
        email: "forgetful@own.test",
        new_address: null,
      });
    }
    const weak = await call(useReset, "POST", {}, { body: { secret, password: "short" } });
    expect(problemCode(weak)).toBe("password.weak");
    const done = await call(useReset, "POST", {}, { body: { secret, password: NEW } });
    expect(done).toMatchObject({ status: 200, body: { email: "forgetful@own.test" } });
    expect(problemCode(await call(getSession, "GET", session))).toBe("auth.required");
    await expect(attempt("forgetful@own.test", OLD)).rejects.toMatchObject({ code: "auth.wrong" });
    expect((await attempt("forgetful@own.test", NEW)).accountId).toBe(who.accountId);
    const again = await call(useReset, "POST", {}, { body: { secret, password: OLD } });
    expect(problemCode(again)).toBe("link.invalid");
    const admin = await openSession(bench, own.admin);
    const { events } = (await call(listTrail, "GET", admin)).body as { events: TrailEvent[] };
    expect(events.find((event) => event.act === "account.password-reset")).toMatchObject({
      who: { name: "forgetful@own.test" },
      details: { endedSessions: 1 },
    });
  });

  it("is used once when two try at once, and ends the other open links", async () => {
    await member("twice");
    await ask("twice@own.test");
    const first = await resetSecret("twice@own.test");
    const count = () => catcher.mails.filter((mail) => mail.to === "twice@own.test").length;
    await ask("twice@own.test");
    await expect.poll(count, { timeout: 10_000 }).toBe(2);
    const second = await resetSecret("twice@own.test");
    expect(second).not.toBe(first);
    const uses = await Promise.all(
      [NEW, OLD].map((password) =>
        call(useReset, "POST", {}, { body: { secret: second, password } }),
      ),
    );
    expect(uses.map(({ status }) => status).toSorted((a, b) => a - b)).toEqual([200, 410]);
    const late = await call(look, "POST", {}, { body: { secret: first } });
    expect(problemCode(late)).toBe("link.invalid");
  });

  it("lets somebody in who tried too often", async () => {
    await member("locked");
    for (let tries = 0; tries < TRIES_PER_ADDRESS; tries += 1) {
      await attempt("locked@own.test", "wrong").catch(() => undefined);
    }
    await expect(attempt("locked@own.test", OLD)).rejects.toMatchObject({
      code: "auth.rate-limited",
    });
    await ask("locked@own.test");
    const secret = await resetSecret("locked@own.test");
    await call(useReset, "POST", {}, { body: { secret, password: NEW } });
    expect((await attempt("locked@own.test", NEW)).sessionId).toHaveLength(36);
  });

  it("answers the same for an address without an account, and sends nothing", async () => {
    await member("known");
    const answers = [await ask("known@own.test"), await ask("unknown@own.test")];
    const [known, unknown] = answers.map(({ status, body, headers }) => {
      headers.delete("x-request-id");
      return { status, body, headers: [...headers] };
    });
    expect(unknown).toEqual(known);
    await catcher.waitFor("known@own.test");
    expect(catcher.mails.some((mail) => mail.to === "unknown@own.test")).toBe(false);
  });

  it.each(["flooded@own.test", "nobody@own.test"])(
    "is asked for only so often, account or not: %s",
    async (email) => {
      if (email.startsWith("flooded")) await member("flooded");
      for (let asked = 0; asked < LINKS_PER_ADDRESS; asked += 1) {
        expect((await ask(email)).status).toBe(202);
      }
      expect(problemCode(await ask(email))).toBe("auth.rate-limited");
    },
  );

  it("does not work when its time is over", async () => {
    const who = await member("late");
    await ask("late@own.test");
    const secret = await resetSecret("late@own.test");
    await asAccount(bench.app, who.accountId, (trx) =>
      trx.updateTable("account_links").set({ expires_at: new Date() }).execute(),
    );
    const late = await call(useReset, "POST", {}, { body: { secret, password: NEW } });
    expect(problemCode(late)).toBe("link.invalid");
  });
});

describe("a new address", () => {
  const change = (who: Record<string, string>, email: string, password = OLD) =>
    call(askAddress, "POST", who, { body: { email, password } });

  it("counts once it is confirmed; the old one is told", async () => {
    const who = await member("mover");
    const session = await openSession(bench, who);
    expect(problemCode(await change(session, "moved@own.test", "wrong"))).toBe("auth.wrong");
    expect(problemCode(await change(session, "mover@own.test"))).toBe("request.invalid");
    expect(await change(session, "Moved@own.test")).toMatchObject({ status: 202, body: null });
    const secret = await secretFor("moved@own.test", "address-change", "Confirm your new address");
    expect((await attempt("mover@own.test", OLD)).accountId).toBe(who.accountId);
    // A link for one thing is not good for another.
    const misused = await call(useReset, "POST", {}, { body: { secret, password: NEW } });
    expect(problemCode(misused)).toBe("link.invalid");
    const done = await call(confirm, "POST", {}, { body: { secret } });
    expect(done).toMatchObject({ status: 200, body: { email: "moved@own.test" } });
    expect((await attempt("moved@own.test", OLD)).accountId).toBe(who.accountId);
    await expect(attempt("mover@own.test", OLD)).rejects.toMatchObject({ code: "auth.wrong" });
    const told = await catcher.waitFor("mover@own.test", "Your sign-in address was changed");
    expect(told.text).toContain("moved@own.test");
    expect((await call(getSession, "GET", session)).body).toMatchObject({
      account: { email: "moved@own.test" },
    });
    expect(problemCode(await call(confirm, "POST", {}, { body: { secret } }))).toBe("link.invalid");
  });

  it("that another account has is not given away, but told", async () => {
    const session = await openSession(bench, await member("greedy"));
    expect(await change(session, "admin@own.test")).toMatchObject({ status: 202, body: null });
    await catcher.waitFor("admin@own.test", "This address has an account already");
  });

  it("that another account takes meanwhile stays there", async () => {
    const session = await openSession(bench, await member("slow"));
    await change(session, "wanted@own.test");
    const secret = await secretFor("wanted@own.test", "address-change", "Confirm your new address");
    await member("wanted");
    const late = await call(confirm, "POST", {}, { body: { secret } });
    expect(problemCode(late)).toBe("conflict.exists");
  });
});

describe("the mail of an invitation", () => {
  const inviteTo = async (email: string): Promise<Invitation> => {
    const admin = await openSession(bench, own.admin);
    const made = await call(invite, "POST", admin, { body: { email, roles: ["tester"] } });
    return (made.body as { invitation: Invitation }).invitation;
  };
  const mailOf = async ({ id }: Invitation) => {
    const admin = await openSession(bench, own.admin);
    const { invitations } = (await call(listInvitations, "GET", admin)).body as {
      invitations: Invitation[];
    };
    return invitations.find((one) => one.id === id)?.mail;
  };

  it("is seen on its way, and where it was refused", async () => {
    const good = await inviteTo("good@else.test");
    expect(good.mail).toEqual({ state: "waiting", error: null });
    await expect.poll(() => mailOf(good)).toEqual({ state: "sent", error: null });
    catcher.refusals.set("refused@else.test", 550);
    const refused = await inviteTo("refused@else.test");
    await expect
      .poll(() => mailOf(refused))
      .toMatchObject({
        state: "not delivered",
        error: expect.stringContaining("550") as unknown,
      });
  });

  it("does not go out once the invitation is withdrawn", async () => {
    catcher.refusals.set("withdrawn@else.test", 451);
    const { id, ...rest } = await inviteTo("withdrawn@else.test");
    await expect.poll(async () => (await mailOf({ id, ...rest }))?.error).toContain("451");
    const admin = await openSession(bench, own.admin);
    await call(withdraw, "DELETE", admin, { params: { invitationId: id } });
    const row = await inLab(bench.app, own.admin, (trx) =>
      trx
        .selectFrom("mails")
        .selectAll()
        .where("to_address", "=", "withdrawn@else.test")
        .executeTakeFirstOrThrow(),
    );
    expect(row).toMatchObject({ sent_at: null, last_error: "the invitation was withdrawn" });
    expect(row.given_up_at).not.toBeNull();
    expect(row.payload).not.toHaveProperty("secret");
  });
});

describe("notices", () => {
  it("are those of one's roles, wanted until one says otherwise", async () => {
    const who = await openSession(bench, await member("chooser", ["tester"]));
    const first = await call(getNotices, "GET", who);
    expect(first.body).toEqual({
      notices: ["analysis-failed", "run-asked", "published"].map((kind) => ({
        kind,
        wanted: true,
      })),
    });
    const body = { kind: "published", wanted: false };
    await call(patchNotices, "PATCH", who, { body });
    const changed = await call(patchNotices, "PATCH", who, { body });
    expect(changed.body).toMatchObject({
      notices: [{ wanted: true }, { wanted: true }, { kind: "published", wanted: false }],
    });
    expect((await call(getNotices, "GET", who)).body).toEqual(changed.body);
    const other = await openSession(bench, own.admin);
    expect(JSON.stringify((await call(getNotices, "GET", other)).body)).not.toContain("false");
    const bad = await call(patchNotices, "PATCH", who, {
      body: { kind: "invitation", wanted: false },
    });
    expect(problemCode(bad)).toBe("request.invalid");
  });
});
