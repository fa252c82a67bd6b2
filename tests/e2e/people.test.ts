/** An admin's day in the browser: people come, change roles and go; a script gets a key and loses it. */
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createLab } from "../../scripts/labs/labs";
import { findAxeFaults, openBrowser, waitForForm } from "../support/browser";
import { createTestDatabase, type TestDatabase } from "../support/database";
import { type LabBench, openLabBench } from "../support/lab-bench";
import { startTestProduct, type TestProduct } from "../support/product";

const PASSWORD = "correct horse battery";
const DESK = { width: 1440, height: 900 };
const PHONE = { width: 390, height: 844 };

let database: TestDatabase;
let bench: LabBench;
let product: TestProduct;
let browser: Browser;
let admin: Page;
let member: Page;

beforeAll(async () => {
  database = await createTestDatabase();
  bench = openLabBench(database);
  product = await startTestProduct(database);
  browser = await openBrowser();
  const link = await createLab(
    { owner: bench.owner, app: bench.app, publicUrl: product.url },
    {
      slug: "withy",
      name: "Withy Lane",
      adminEmail: "ines@withy.example",
      adminName: "Ines Varley",
      timeZone: "Europe/Helsinki",
    },
  );
  admin = await openPage();
  await joinBy(admin, link);
});

afterAll(async () => {
  await browser.close();
  await product.stop();
  await bench.close();
  await database.drop();
});

async function openPage(viewport = DESK): Promise<Page> {
  const context = await browser.newContext({
    baseURL: product.url,
    viewport,
    bypassCSP: true,
    reducedMotion: "reduce",
  });
  context.setDefaultTimeout(20_000);
  return context.newPage();
}

async function joinBy(page: Page, link: string): Promise<void> {
  await page.goto(link);
  await waitForForm(page);
  await page.getByLabel("choose a password").fill(PASSWORD);
  await page.getByRole("button", { name: /^Join/ }).click();
  await page.waitForURL((url) => url.pathname === "/series");
}

/** Goes to a page and waits for what only stands there once its data have come. */
async function goTo(page: Page, path: string, awaited: string): Promise<void> {
  await page.goto(path);
  await page.getByText(awaited).first().waitFor();
}

const pathOf = (page: Page): string => new URL(page.url()).pathname;

const rolesOf = (page: Page, name: string) => page.getByRole("group", { name: `Roles of ${name}` });

/** Ticks and unticks as the admin, then waits until it is saved. */
async function setRoles(name: string, wanted: Record<string, boolean>): Promise<void> {
  for (const [role, on] of Object.entries(wanted)) {
    await rolesOf(admin, name).getByRole("checkbox", { name: role }).setChecked(on);
  }
  const save = admin.getByRole("button", { name: `Save roles of ${name}` });
  await save.click();
  await save.waitFor({ state: "detached" });
}

const callBy = (token: string, path: string): Promise<Response> =>
  fetch(`${product.url}/api/v1/${path}`, { headers: { authorization: `Bearer ${token}` } });
const whoAmI = (token: string): Promise<Response> => callBy(token, "session");

describe("people of a lab", () => {
  it("keeps the last admin, and says why", async () => {
    await goTo(admin, "/members", "You are alone here");
    const box = rolesOf(admin, "Ines Varley").getByRole("checkbox", { name: "admin" });
    expect(await box.isChecked()).toBe(true);
    expect(await box.isDisabled()).toBe(true);
    expect(await admin.getByText("a lab keeps at least one").isVisible()).toBe(true);
    expect(await admin.getByRole("button", { name: "Leave the lab" }).count()).toBe(0);
  });

  it("invites by a link that is shown once and used once", async () => {
    const form = admin.getByRole("form", { name: "Invite somebody" });
    await form.getByLabel("email").fill("nobody");
    await form.getByRole("button", { name: "Make the invitation" }).click();
    await form.getByText("Enter an address such as").waitFor();
    await form.getByLabel("email").fill("Bo@withy.example");
    await form.getByLabel("name").fill("Bo Lindqvist");
    await form.getByRole("button", { name: "Make the invitation" }).click();
    const link = await admin.getByLabel("one-time link").inputValue();
    expect(link).toMatch(new RegExp(`^${product.url}/invitation/[\\w-]{43}$`));
    expect(await findAxeFaults(admin)).toEqual([]);
    await admin.getByRole("button", { name: "Done" }).click();
    await admin.getByRole("button", { name: "Withdraw the invitation for bo@" }).waitFor();
    expect(await admin.content()).not.toContain(link);

    member = await openPage(PHONE);
    await joinBy(member, link);
    const late = await openPage();
    await goTo(late, link, "This invitation is no longer good");
    await late.context().close();
  });

  it("lets a tester read who is there, and no more", async () => {
    await goTo(member, "/members", "What each role may do");
    await member.getByText("Ines Varley").waitFor();
    expect(await member.getByRole("checkbox").count()).toBe(0);
    expect(await member.getByRole("link", { name: "Trail" }).count()).toBe(0);
    await member.goto("/lab/trail");
    expect(pathOf(member)).toBe("/series");
    await goTo(member, "/lab", "An admin of the lab changes these.");
    expect(await member.getByRole("form").count()).toBe(0);
  });

  it("gives and takes roles with effect from the next look", async () => {
    await goTo(admin, "/members", "Bo Lindqvist");
    await setRoles("Bo Lindqvist", { admin: true });
    await goTo(member, "/lab/trail", "changed the roles of Bo Lindqvist");
    await setRoles("Bo Lindqvist", { admin: false, analyst: true });
    await member.goto("/lab/trail");
    expect(pathOf(member)).toBe("/series");
    await goTo(member, "/account", "you are tester, analyst");
  });

  it("takes no member without a role", async () => {
    const boxes = rolesOf(admin, "Bo Lindqvist");
    await boxes.getByRole("checkbox", { name: "tester" }).uncheck();
    await boxes.getByRole("checkbox", { name: "analyst" }).uncheck();
    await admin.getByText("Choose at least one role.").waitFor();
    expect(await admin.getByRole("button", { name: "Save roles of Bo" }).count()).toBe(0);
    await admin.getByRole("button", { name: "Undo" }).click();
    expect(await boxes.getByRole("checkbox", { name: "tester" }).isChecked()).toBe(true);
  });
});

describe("a token", () => {
  let token: string;

  it("is shown once and works for a script, as far as its owner holds the roles", async () => {
    await goTo(member, "/lab/tokens", "No tokens yet");
    const form = member.getByRole("form", { name: "New token" });
    expect(await form.getByRole("checkbox").count()).toBe(2);
    await form.getByLabel("name").fill("bench computer");
    await form.getByRole("checkbox", { name: "analyst" }).check();
    await form.getByRole("button", { name: "Make the token" }).click();
    token = await member.getByLabel("token", { exact: true }).inputValue();
    await member.getByRole("button", { name: "Done" }).click();
    expect(await member.content()).not.toContain(token);
    const answer = await whoAmI(token);
    expect(answer.status).toBe(200);
    expect(await answer.json()).toMatchObject({ via: "token", roles: ["tester", "analyst"] });
    await goTo(admin, "/members", "Bo Lindqvist");
    await setRoles("Bo Lindqvist", { analyst: false });
    expect(await (await whoAmI(token)).json()).toMatchObject({ roles: ["tester"] });
    await goTo(admin, "/lab/tokens", "not analyst: its owner does not hold it now");
  });

  it("is revoked by the admin at once", async () => {
    await admin.getByRole("button", { name: "Revoke the token bench computer" }).click();
    await admin.getByRole("button", { name: "Revoke it" }).click();
    await admin.getByRole("heading", { name: "Expired or revoked" }).waitFor();
    const answer = await whoAmI(token);
    expect(answer.status).toBe(401);
    expect(await answer.json()).toMatchObject({ code: "auth.token-invalid" });
  });
});

describe("the account", () => {
  it("changes its password and ends its other sessions", async () => {
    const elsewhere = await openPage();
    await elsewhere.goto("/sign-in");
    await waitForForm(elsewhere);
    await elsewhere.getByLabel("email").fill("bo@withy.example");
    await elsewhere.getByLabel("password", { exact: true }).fill(PASSWORD);
    await elsewhere.getByRole("button", { name: "Sign in" }).click();
    await elsewhere.waitForURL((url) => url.pathname === "/series");

    await goTo(member, "/account", "this one");
    const form = member.getByRole("form", { name: "Password" });
    await form.getByLabel("present password").fill("not the right one");
    await form.getByLabel("new password").fill("another horse battery");
    await form.getByRole("button", { name: "Change the password" }).click();
    await form.getByText("This is not your present password.").waitFor();
    await form.getByLabel("present password").fill(PASSWORD);
    await form.getByRole("button", { name: "Change the password" }).click();
    await form.getByText("One other session has ended.").waitFor();
    await member.getByText("You are signed in nowhere else.").waitFor();
    await elsewhere.goto("/series");
    expect(pathOf(elsewhere)).toBe("/sign-in");
    await elsewhere.context().close();
  });

  it("keeps its theme", async () => {
    const saved = member.waitForResponse((answer) => answer.request().method() === "PATCH");
    await member.getByRole("radio", { name: "dark" }).check();
    expect((await saved).status()).toBe(200);
    // Another device has no cookie of it yet: the account itself must know.
    await member.context().clearCookies({ name: "tidemark-theme" });
    await goTo(member, "/account", "this one");
    expect(await member.evaluate("document.documentElement.dataset.theme")).toBe("dark");
  });
});

describe("settings of the lab", () => {
  it("are compared where two admins change them", async () => {
    const second = await admin.context().newPage();
    await goTo(admin, "/lab", "told in it");
    await goTo(second, "/lab", "told in it");
    await second.getByLabel("name", { exact: true }).fill("Withy Lane Lab");
    await second.getByRole("button", { name: "Save" }).click();
    await second.getByText("Saved.").waitFor();
    await second.close();
    await admin.getByLabel("time zone").fill("Asia/Tokyo");
    await admin.getByRole("button", { name: "Save" }).click();
    await admin.getByText("Another admin changed the settings meanwhile").waitFor();
    expect(await admin.getByRole("rowheader").allTextContents()).toEqual(["time zone"]);
    await admin.getByRole("button", { name: "Save mine over it" }).click();
    await admin.getByText("Saved.").waitFor();
    const answer = await admin.request.get("/api/v1/lab");
    expect(await answer.json()).toMatchObject({
      name: "Withy Lane Lab",
      time_zone: "Asia/Tokyo",
    });
  });

  it("stand in the trail, which can be asked for them alone", async () => {
    await goTo(admin, "/lab/trail", "signed in");
    await admin.getByRole("radio", { name: "settings" }).check();
    await admin.getByText("signed in").first().waitFor({ state: "detached" });
    await admin.getByText("changed its time zone to Asia/Tokyo").waitFor();
    expect(new URL(admin.url()).search).toBe("?about=lab");
  });
});

describe("every page", () => {
  it.each([
    ["/members", "since"],
    ["/lab/tokens", "bench computer"],
    ["/lab", "told in it"],
    ["/lab/trail", "founded the lab"],
    ["/account", "this one"],
  ])("%s is fit for readers and keyboards, on a desk and on a phone", async (path, awaited) => {
    for (const [viewport, colorScheme] of [
      [DESK, "light"],
      [PHONE, "dark"],
    ] as const) {
      await admin.setViewportSize(viewport);
      await admin.emulateMedia({ colorScheme });
      await goTo(admin, path, awaited);
      expect(await findAxeFaults(admin)).toEqual([]);
      const tooWide = await admin.evaluate(
        "document.documentElement.scrollWidth - window.innerWidth",
      );
      expect(tooWide).toBeLessThanOrEqual(0);
    }
  });
});

describe("a removed member", () => {
  it("is out at once, in the browser and by token", async () => {
    await goTo(member, "/lab/tokens", "Expired or revoked");
    const form = member.getByRole("form", { name: "New token" });
    await form.getByLabel("name").fill("night");
    await form.getByRole("button", { name: "Make the token" }).click();
    const token = await member.getByLabel("token", { exact: true }).inputValue();
    expect((await callBy(token, "series")).status).toBe(200);

    await admin.setViewportSize(DESK);
    await goTo(admin, "/members", "Bo Lindqvist");
    await admin.getByRole("button", { name: "Remove Bo Lindqvist" }).click();
    await admin
      .getByRole("dialog", { name: "Remove Bo Lindqvist from Withy Lane Lab?" })
      .getByRole("button", { name: "Remove" })
      .click();
    await rolesOf(admin, "Bo Lindqvist").waitFor({ state: "detached" });

    const refused = await callBy(token, "series");
    expect(refused.status).toBe(403);
    expect(await refused.json()).toMatchObject({ code: "auth.forbidden" });
    await member.goto("/series");
    expect(pathOf(member)).toBe("/account");
    await member.getByText("You belong to no lab at the moment.").waitFor();
    expect((await member.request.get("/api/v1/members")).status()).toBe(403);
  });
});
