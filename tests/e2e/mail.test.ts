/** By mail in the browser: a forgotten password is set anew, an address moves, a notice is done without. */
import type { Browser, BrowserContext, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type MailCatcher, openMailCatcher } from "../support/mail-catcher";
import { openApiBench, type ApiBench } from "../api/support";
import {
  DESK,
  findAxeFaults,
  measureOverflow,
  openBrowser,
  PHONE,
  waitForForm,
} from "../support/browser";

const NEW_PASSWORD = "another horse battery";
let bench: ApiBench;
let catcher: MailCatcher;
let browser: Browser;
let context: BrowserContext;
let page: Page;
let email: string;

beforeAll(async () => {
  catcher = await openMailCatcher();
  bench = await openApiBench({ TIDEMARK_SMTP_URL: catcher.url });
  browser = await openBrowser();
  context = await browser.newContext({
    baseURL: bench.product.url,
    viewport: PHONE,
    bypassCSP: true,
    reducedMotion: "reduce",
  });
  context.setDefaultTimeout(20_000);
  page = await context.newPage();
  email = `all.${bench.all.scope.accountId.slice(0, 8)}@lab.test`;
});
afterAll(async () => {
  await browser.close();
  await bench.stop();
  await catcher.close();
});

/** What is wrong with the page as it stands; none is good. */
const faults = async (): Promise<unknown[]> => [
  ...(await findAxeFaults(page)),
  ...((await measureOverflow(page)) > 0 ? ["wider than the window"] : []),
];

const linkIn = (text: string): string =>
  text.split("\n").find((line) => line.startsWith(bench.product.url)) ?? "";

describe("by mail", () => {
  it("a forgotten password is set anew", async () => {
    await page.goto("/sign-in");
    await page.getByRole("link", { name: "Forgotten the password?" }).click();
    await page.getByRole("heading", { name: "Forgotten password" }).waitFor();
    await waitForForm(page);
    expect(await faults()).toEqual([]);
    await page.getByLabel("email").fill(email);
    await page.getByRole("button", { name: "Send the link" }).click();
    await page.getByRole("heading", { name: "Look into your mail" }).waitFor();
    expect(await faults()).toEqual([]);
    const mail = await catcher.waitFor(email, "Set a new password");
    await page.goto(linkIn(mail.text));
    await waitForForm(page);
    await page.getByLabel("new password").fill("short");
    await page.getByRole("button", { name: "Set the password" }).click();
    await page.getByText("this one has 5").waitFor();
    expect(await faults()).toEqual([]);
    await page.getByLabel("new password").fill(NEW_PASSWORD);
    await page.getByRole("button", { name: "Set the password" }).click();
    await page.waitForURL((url) => url.pathname === "/series");
    await page.goto(linkIn(mail.text));
    await page.getByText("This link is no longer good").waitFor();
  });

  it("an address moves once its new place is confirmed", async () => {
    await page.setViewportSize(DESK);
    await page.goto("/account");
    await page.getByRole("button", { name: "Change the address" }).click();
    const form = page.getByRole("form", { name: "Address" });
    await form.getByLabel("new address").fill("moved@lab.test");
    await form.getByLabel("your password").fill("not the right one");
    await form.getByRole("button", { name: "Send the link" }).click();
    await form.getByText("This is not your present password.").waitFor();
    await form.getByLabel("your password").fill(NEW_PASSWORD);
    await form.getByRole("button", { name: "Send the link" }).click();
    await page.getByText("A link went to moved@lab.test").waitFor();
    expect(await faults()).toEqual([]);
    const mail = await catcher.waitFor("moved@lab.test");
    await page.goto(linkIn(mail.text));
    await page.getByRole("button", { name: "Confirm this address" }).click();
    await page.getByText("From now on you sign in with moved@lab.test").waitFor();
    expect(await faults()).toEqual([]);
    await catcher.waitFor(email, "Your sign-in address was changed");
  });

  it("a notice is done without", async () => {
    await page.goto("/account");
    const box = page.getByRole("checkbox", { name: "a series is published" });
    await box.uncheck();
    await expect.poll(() => box.isEnabled()).toBe(true);
    await page.reload();
    await page.getByText("moved@lab.test").first().waitFor();
    expect(await box.isChecked()).toBe(false);
    expect(await page.getByRole("checkbox", { name: "a series is signed off" }).isChecked()).toBe(
      true,
    );
  });
});
