import { mkdtempSync, readdirSync, rmSync, statSync } from "node:fs";
import { request } from "node:http";
import { tmpdir } from "node:os";
import { join } from "node:path";
import nodemailer from "nodemailer";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { findFreePort } from "../setup/ports";
import { openMailbox, type Mailbox } from "./open-mailbox";

let folder: string;
let url: string;
let smtpPort: number;
let mailbox: Mailbox;

beforeAll(async () => {
  folder = join(mkdtempSync(join(tmpdir(), "tidemark-mailbox-")), "mailbox");
  smtpPort = await findFreePort();
  const pagePort = await findFreePort();
  url = `http://127.0.0.1:${pagePort}`;
  mailbox = await openMailbox({ folder, smtpPort, pagePort });
});
afterAll(async () => {
  await mailbox.close();
  rmSync(join(folder, ".."), { recursive: true });
});

const send = (subject: string): Promise<unknown> =>
  nodemailer.createTransport({ host: "127.0.0.1", port: smtpPort }).sendMail({
    from: "Tidemark <tidemark@localhost>",
    to: "bo@withy.example",
    subject,
    text: "Open\nhttp://lab.test/reset-password/abc\nnow & then",
    html: '<!doctype html><html><head></head><body><a href="http://lab.test/x">go</a></body></html>',
  });

const page = async (path: string): Promise<string> => (await fetch(`${url}${path}`)).text();

describe("the local mailbox", () => {
  it("says that it is empty, and what would fill it", async () => {
    expect(await page("/")).toContain("No mail yet");
  });

  it("shows what came, newest first, with the mail as it is", async () => {
    await send("The first");
    await send("<The> second");
    const list = await page("/");
    expect(list.indexOf("&lt;The&gt; second")).toBeLessThan(list.indexOf("The first"));
    const path = /href="(\/mail\/[\w-]+)"/.exec(list)?.[1] ?? "";
    const mail = await page(path);
    expect(mail).toContain("bo@withy.example");
    expect(mail).toContain('href="http://lab.test/reset-password/abc"');
    expect(mail).toContain("now &amp; then");
    const framed = await fetch(`${url}${path}/html`);
    expect(framed.headers.get("content-security-policy")).toContain("sandbox allow-popups");
    expect(await framed.text()).toContain('<base target="_blank">');
  });

  it("keeps its mails to their owner", () => {
    expect(statSync(folder).mode & 0o777).toBe(0o700);
    const [name = ""] = readdirSync(folder);
    expect(statSync(join(folder, name)).mode & 0o777).toBe(0o600);
  });

  it.each(["/mail/1", "/mail/..%2f..%2fsecrets", "/mail/1780000000000-00000000", "/other"])(
    "has nothing at %s",
    async (path) => {
      expect((await fetch(`${url}${path}`)).status).toBe(404);
    },
  );

  it("is read under its own name alone, and only read", async () => {
    const status = await new Promise<number | undefined>((resolve) => {
      request(url, { headers: { host: "evil.example" } }, (answer) => {
        answer.resume();
        resolve(answer.statusCode);
      }).end();
    });
    expect(status).toBe(403);
    expect((await fetch(url, { method: "POST" })).status).toBe(405);
  });
});
