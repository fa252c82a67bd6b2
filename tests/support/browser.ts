/** Chromium at the built product: sign in, look, and ask axe. */
import { readFileSync } from "node:fs";
import { createRequire } from "node:module";
import type { AxeResults } from "axe-core";
import { chromium, type Browser, type BrowserContext, type Page } from "playwright-core";

/** Where the distribution puts it. */
const CHROMIUM = "/usr/bin/chromium";
const axeSource = readFileSync(
  createRequire(import.meta.url).resolve("axe-core/axe.min.js"),
  "utf8",
);

export const DESK = { width: 1440, height: 900 };
export const PHONE = { width: 390, height: 844 };

export const openBrowser = (): Promise<Browser> => chromium.launch({ executablePath: CHROMIUM });

export interface SignIn {
  url: string;
  email: string;
  password: string;
}

/** @returns a context that is signed in, of the given size. */
export async function signIn(
  browser: Browser,
  { url, email, password }: SignIn,
  viewport: typeof DESK,
): Promise<BrowserContext> {
  const context = await browser.newContext({ viewport, baseURL: url });
  context.setDefaultTimeout(30_000);
  const page = await context.newPage();
  await page.goto("/sign-in");
  await page.getByLabel("email").fill(email);
  await page.getByLabel("password", { exact: true }).fill(password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL((address) => address.pathname === "/series");
  await page.close();
  return context;
}

/** Forms that came with the page are taken over by its script; before that they would be sent as plain ones. */
export async function waitForForm(page: Page): Promise<void> {
  await page.waitForFunction(
    "Object.keys(document.querySelector('form') ?? {}).some((key) => key.startsWith('__reactProps'))",
  );
}

/** What a page as it stands now lacks for readers, keyboards and weak eyes: rule and elements at fault; empty is good. */
export async function findAxeFaults(page: Page): Promise<string[]> {
  await page.evaluate(axeSource);
  const results = await page.evaluate<AxeResults>(
    "axe.run(document, { resultTypes: ['violations'] })",
  );
  return results.violations.flatMap(({ id, nodes }) =>
    nodes.map(({ html }) => `${id}: ${html.slice(0, 160)}`),
  );
}

/** Pixels by which the page is wider than the window. */
export const measureOverflow = (page: Page): Promise<number> =>
  page.evaluate<number>("document.documentElement.scrollWidth - innerWidth");
