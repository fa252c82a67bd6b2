import { describe, expect, it } from "vitest";
import { hashPassword, PASSWORD_MIN, verifyPassword } from "./passwords";
import { createSecret, createToken, digestSecret } from "./secrets";
import { parseRefusal, toRefusalText, toRefusalWords } from "./sign-in-refusal";

describe("passwords", () => {
  it("are kept as argon2id with the stated cost, salted", async () => {
    const [one, two] = [await hashPassword("twelve chars"), await hashPassword("twelve chars")];
    expect(one).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(one).not.toBe(two);
    expect(await verifyPassword(one, "twelve chars")).toBe(true);
    expect(await verifyPassword(one, "twelve charz")).toBe(false);
    expect(await verifyPassword(null, "twelve chars")).toBe(false);
  });

  it.each(["", "x".repeat(PASSWORD_MIN - 1), "x".repeat(201)])("refuse %j", async (password) => {
    await expect(hashPassword(password)).rejects.toMatchObject({
      code: "password.weak",
      message: expect.stringContaining(String(password.length)) as string,
    });
  });

  it("do not match by a long common start", async () => {
    const stored = await hashPassword("x".repeat(200));
    expect(await verifyPassword(stored, "x".repeat(201))).toBe(false);
  });
});

describe("secrets", () => {
  it("are long, different and safe in a link", () => {
    const secrets = Array.from({ length: 50 }, createSecret);
    expect(new Set(secrets).size).toBe(50);
    expect(secrets.filter((secret) => !/^[\w-]{43}$/.test(secret))).toEqual([]);
  });

  it("of tokens show their start and hide the rest", () => {
    const { token, prefix } = createToken();
    expect(token).toMatch(/^tdm_[\w-]{43}$/);
    expect(prefix).toBe(token.slice(0, 10));
  });

  it("are stored as SHA-256", () => {
    // FIPS 180-2, appendix B.1
    expect(digestSecret("abc")).toBe(
      "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad",
    );
  });
});

describe("a refused sign-in", () => {
  it.each([
    [{ code: "auth.wrong", triesLeft: 4 }, "4 tries are left"],
    [{ code: "auth.wrong", triesLeft: 1 }, "1 try is left"],
    [{ code: "auth.wrong", triesLeft: 0 }, "No try is left"],
    [{ code: "auth.rate-limited", waitS: 61 }, "in 2 minutes"],
    [{ code: "auth.rate-limited", waitS: 1 }, "in 1 minute."],
    [{ code: "database.unavailable" }, "database"],
  ] as const)("travels as text and says %j", (refusal, words) => {
    expect(parseRefusal(toRefusalText(refusal))).toEqual(refusal);
    expect(toRefusalWords(refusal)).toContain(words);
  });

  it.each(["", "CredentialsSignin", '{"code":"other"}', '{"code":"auth.wrong"}'])(
    "takes %j for our fault",
    (text) => {
      expect(parseRefusal(text)).toEqual({ code: "internal" });
    },
  );
});
