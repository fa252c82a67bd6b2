/** Side by side: a member picks series in the list, a reader picks published tests, and both may pass the address on. */
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { publishSeries } from "../../db/acts/publish";
import { inLab } from "../../db/in-lab";
import type { Result } from "../../lib/result/result-schema";
import { openApiBench, type ApiBench } from "../api/support";
import { TEST_PASSWORD } from "../support/lab-bench";
import { makeReviewableSeries } from "../support/reviewable";
import { makeSampleResult } from "../support/sample-result";
import { signTestSeries } from "../support/signed-series";
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
let page: Page;
const ids = new Map<string, string>();

/** The sample's loudspeaker, so much quieter in every band. */
function quieter(byDb: number): Result {
  const result = makeSampleResult();
  for (const band of result.bands) {
    for (const one of [...band.limits, ...band.levels]) {
      if (one.spl_dB !== null) one.spl_dB -= byDb;
    }
  }
  return result;
}

async function addSeries(model: string, result: Result): Promise<void> {
  const { scope } = bench.all;
  const made = await makeReviewableSeries(bench, scope, { model, result });
  ids.set(model, made.seriesId);
  await inLab(bench.app, scope, async (trx) => {
    await signTestSeries(trx, scope, { ...made, criterion: { compression_dB: 3 } });
    await publishSeries(trx, scope, made.seriesId, {
      slug: null,
      embargoUntil: null,
      changeNote: null,
      words: {
        words: "",
        supplied_by: "bought by the lab",
        maker_statement: null,
        answer_to_maker: null,
        evidence_public: false,
      },
    });
  });
}

beforeAll(async () => {
  bench = await openApiBench();
  browser = await openBrowser();
  await addSeries("Osier 8A", makeSampleResult());
  await addSeries("Fennel 5", quieter(9));
  await addSeries("Ketch 12", { ...makeSampleResult(), environment: "ground-plane" });
  const context = await signIn(
    browser,
    {
      url: bench.product.url,
      email: `all.${bench.all.scope.accountId.slice(0, 8)}@lab.test`,
      password: TEST_PASSWORD,
    },
    DESK,
  );
  page = await context.newPage();
});
afterAll(async () => {
  await browser.close();
  await bench.stop();
});

describe("comparing", () => {
  it("begins in the list, switches the reference, and stands in the address", async () => {
    await page.goto("/series");
    for (const model of ["Osier 8A", "Fennel 5", "Ketch 12"]) {
      await page
        .getByRole("checkbox", { name: `Compare ${model}` })
        .first()
        .check();
    }
    await page.getByRole("link", { name: "Compare 3" }).click();
    await page.getByText("Ketch 12 was left out.").waitFor();
    const picks = page.getByRole("list", { name: "Compared loudspeakers" });
    expect(await picks.getByRole("link", { name: "A: Osier 8A" }).count()).toBe(1);
    expect(await picks.getByRole("link", { name: "B: Fennel 5" }).count()).toBe(1);
    const figure = page.getByRole("img", { name: /^A, Osier 8A/ });
    await figure.focus();
    await page.keyboard.press("ArrowRight");
    await page.keyboard.press("ArrowRight");
    await page.getByText("9.0 dB quieter than A").waitFor();
    expect(await page.getByRole("note").innerText()).toContain("WARNING");
    expect(await findAxeFaults(page)).toEqual([]);
    await page.setViewportSize(PHONE);
    expect(await measureOverflow(page)).toBeLessThanOrEqual(0);
    expect(await findAxeFaults(page)).toEqual([]);
    await page.setViewportSize(DESK);
    await picks.getByRole("button", { name: "Make reference" }).click();
    await page.getByRole("img", { name: /^A, Fennel 5/ }).waitFor();
    const address = new URL(page.url());
    expect(address.searchParams.get("series")?.split(",")[0]).toBe(ids.get("Fennel 5"));
    const other = await page.context().newPage();
    await other.goto(address.href);
    await other.getByRole("img", { name: /^A, Fennel 5/ }).waitFor();
    await other.close();
  });

  it("is open to readers without script, for what is published", async () => {
    const reader = await browser.newPage({
      baseURL: bench.product.url,
      viewport: PHONE,
      javaScriptEnabled: false,
    });
    await reader.goto("/published?maker=Withy+Lane&from=90");
    for (const model of ["Osier 8A", "Fennel 5"]) {
      await reader.getByRole("link", { name: `Add to compare: ${model}` }).click();
    }
    await reader.getByRole("link", { name: "Compare 2" }).click();
    const text = await reader.locator("main").innerText();
    expect(text).toContain("WARNING");
    expect(text).toContain("3\u00a0dB compression");
    await reader.getByRole("link", { name: "Make reference: Fennel 5" }).click();
    const address = reader.url();
    await reader.close();
    expect(address).toContain("t=own%2Ffennel-5,own%2Fosier-8a");
    const csv = await fetch(address.replace("/compare?", "/compare/csv?"));
    const method = await fetch(`${bench.product.url}/how-we-measure`);
    expect(method.headers.get("content-security-policy")).toContain("default-src 'none'");
    expect(await method.text()).not.toContain("<script");
    expect(csv.headers.get("content-type")).toContain("text/csv");
    expect(await csv.text()).toContain("WARNING: Up to");
    for (const [size, scheme] of [
      [DESK, "light"],
      [PHONE, "dark"],
    ] as const) {
      const looked = await browser.newPage({
        viewport: size,
        colorScheme: scheme,
        bypassCSP: true,
      });
      for (const path of [
        address,
        `${bench.product.url}/published?t=own%2Fosier-8a`,
        `${bench.product.url}/how-we-measure`,
      ]) {
        await looked.goto(path);
        expect(await findAxeFaults(looked)).toEqual([]);
        expect(await measureOverflow(looked)).toBeLessThanOrEqual(0);
      }
      await looked.close();
    }
  });
});
