/** From the signed series to the reader's page and back: a reviewer publishes, somebody reads, the lab withdraws. */
import { gzipSync } from "node:zlib";
import type { Browser, BrowserContext, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { TEST_PASSWORD } from "../support/lab-bench";
import { makeReviewableSeries } from "../support/reviewable";
import { signTestSeries } from "../support/signed-series";
import { openApiBench, type ApiBench } from "../api/support";
import {
  DESK,
  findAxeFaults,
  measureOverflow,
  openBrowser,
  PHONE,
  signIn,
} from "../support/browser";

let bench: ApiBench;
let browser: Browser;
let lab: BrowserContext;
let page: Page;
let seriesId: string;
let address: string;

beforeAll(async () => {
  bench = await openApiBench();
  browser = await openBrowser();
  const { scope } = bench.all;
  const made = await makeReviewableSeries(bench, scope);
  seriesId = made.seriesId;
  await inLab(bench.app, scope, (trx) =>
    signTestSeries(trx, scope, {
      seriesId,
      analysisId: made.analysisId,
      criterion: { compression_dB: 3 },
    }),
  );
  lab = await signIn(
    browser,
    {
      url: bench.product.url,
      email: `all.${scope.accountId.slice(0, 8)}@lab.test`,
      password: TEST_PASSWORD,
    },
    DESK,
  );
  page = await lab.newPage();
  address = `${bench.product.url}/t/own/osier-8a`;
});
afterAll(async () => {
  await browser.close();
  await bench.stop();
});

/** A reader's browser: nobody is signed in. */
async function read(viewport: typeof DESK, script: boolean, scheme: "light" | "dark" = "light") {
  const context = await browser.newContext({
    viewport,
    javaScriptEnabled: script,
    colorScheme: scheme,
    bypassCSP: true,
  });
  const reader = await context.newPage();
  await reader.goto(address);
  return reader;
}

describe("publication", () => {
  it("is an act on the Summary tab", async () => {
    await page.goto(`/series/${seriesId}/summary`);
    await page.getByText("as it would be published").waitFor();
    const form = page.getByRole("form", { name: "Publish" });
    await form.getByLabel("who supplied the unit").fill("bought by the lab");
    await form.getByLabel("your words to readers").fill("A loudspeaker for small rooms.");
    expect(await findAxeFaults(page)).toEqual([]);
    expect(await measureOverflow(page)).toBeLessThanOrEqual(0);
    await form.getByRole("checkbox", { name: /I have read/ }).check();
    await form.getByRole("button", { name: "Publish" }).click();
    await page.getByRole("link", { name: "Revision 1", exact: true }).waitFor();
    expect(await page.getByText("Publish a correction").count()).toBe(1);
  });

  it("is read without script, in any size and theme", async () => {
    const plain = await read(DESK, false);
    const text = await plain.locator("main").innerText();
    expect(text).toContain("WARNING");
    expect(text).toContain("bought by the lab");
    expect(text).toContain("A loudspeaker for small rooms.");
    expect(await plain.locator("form").count()).toBe(2);
    expect(await plain.locator("form:visible").count()).toBe(0);
    for (const [size, scheme] of [
      [DESK, "light"],
      [DESK, "dark"],
      [PHONE, "light"],
      [PHONE, "dark"],
    ] as const) {
      const reader = await read(size, true, scheme);
      expect(await findAxeFaults(reader)).toEqual([]);
      expect(await measureOverflow(reader)).toBeLessThanOrEqual(0);
    }
  });

  it("answers the reader's own room once the script is there", async () => {
    const reader = await read(DESK, true);
    await reader.getByLabel("measured at your seat").fill("88");
    await reader.getByRole("radio", { name: "working day, NIOSH" }).check();
    const result = reader.locator("#seat-result");
    expect(await result.innerText()).toContain("used up in 4\u00a0h");
    await reader.getByLabel("usual level at your seat").fill("110");
    expect(await reader.locator("#enough-result").innerText()).toContain("WARNING");
  });

  it("is small, its own, and kept by shared caches for a minute at most", async () => {
    const response = await fetch(address);
    expect(response.headers.get("cache-control")).toContain("s-maxage=60");
    expect(response.headers.get("content-security-policy")).toContain("default-src 'none'");
    expect(response.headers.get("set-cookie")).toBeNull();
    expect(gzipSync(await response.text()).length).toBeLessThan(60_000);
    const etag = response.headers.get("etag") ?? "";
    const again = await fetch(address, { headers: { "if-none-match": etag } });
    expect(again.status).toBe(304);
    const list = await fetch(`${bench.product.url}/published`);
    expect(await list.text()).toContain("/t/own/osier-8a");
    expect((await fetch(`${bench.product.url}/t/own/nothing`)).status).toBe(404);
  });

  it("says at once that it was withdrawn, and why", async () => {
    await page.getByRole("button", { name: "Withdraw" }).click();
    const dialog = page.getByRole("dialog");
    await dialog.getByRole("textbox").fill("the wrong microphone file");
    await dialog.getByRole("button", { name: "Withdraw it" }).click();
    await page.getByText("Withdrawn: the wrong microphone file").waitFor();
    const response = await fetch(address);
    expect(response.status).toBe(410);
    const text = await response.text();
    expect(text).toContain("This test was withdrawn.");
    expect(text).toContain("the wrong microphone file");
    expect(text).not.toContain("101\u00a0dB");
    const list = await fetch(`${bench.product.url}/published`);
    expect(await list.text()).not.toContain("/t/own/osier-8a");
  });
});
