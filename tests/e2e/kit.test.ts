/** What is carried away: the card in somebody else's page, a link that unfolds, pictures and values. */
import { readFile } from "node:fs/promises";
import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import type { Browser, Frame, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { inLab } from "../../db/in-lab";
import { publish, withdrawPublication } from "../../lib/api/publications";
import { parseValuesCsv, parseValuesJson } from "../../lib/kit/values";
import { digestText } from "../../lib/publication/canonical";
import { call, openApiBench, type ApiBench } from "../api/support";
import { TEST_PASSWORD } from "../support/lab-bench";
import { makeReviewableSeries } from "../support/reviewable";
import { signTestSeries } from "../support/signed-series";
import { DESK, findAxeFaults, openBrowser, PHONE, signIn } from "../support/browser";

let bench: ApiBench;
let browser: Browser;
let elsewhere: Server;
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
  const body = { supplied_by: "bought by the lab", slug: "osier-8a" };
  const view = await call(bench, publish, { params: { seriesId }, body });
  address = `${bench.product.url}${view.path}`;
  // A page of another origin: whatever its address asks for stands in its frame.
  elsewhere = createServer((request, response) => {
    response.setHeader("content-type", "text/html");
    const code = new URL(request.url ?? "", "http://x").searchParams.get("code") ?? "";
    response.end(`<!doctype html><title>Article</title><p>words</p>${code}`);
  }).listen(0, "127.0.0.1");
});
afterAll(async () => {
  elsewhere.close();
  await browser.close();
  await bench.stop();
});

const oembedSchema = z.object({
  type: z.string(),
  html: z.string(),
  width: z.number(),
  height: z.number(),
  thumbnail_url: z.string().optional(),
});
const askOembed = async (url: string, more = "") =>
  oembedSchema.parse(
    await (await fetch(`${bench.product.url}/oembed?url=${encodeURIComponent(url)}${more}`)).json(),
  );

/** An article elsewhere that holds this code. */
async function openArticle(code: string, scheme: "light" | "dark" = "light"): Promise<Page> {
  const context = await browser.newContext({
    viewport: { width: 800, height: 700 },
    colorScheme: scheme,
  });
  const page = await context.newPage();
  const { port } = elsewhere.address() as AddressInfo;
  await page.goto(`http://127.0.0.1:${port}/?code=${encodeURIComponent(code)}`);
  return page;
}

const frameOf = async (page: Page): Promise<Frame> => {
  const frame = await (await page.waitForSelector("iframe")).contentFrame();
  if (frame === null) throw new Error("the frame holds nothing");
  await frame.waitForLoadState();
  await frame.evaluate("document.fonts.ready");
  return frame;
};

/** Pixels by which the card is larger than its frame, across and down. */
const measureExcess = (frame: Frame): Promise<[number, number]> =>
  frame.evaluate<[number, number]>(
    "[document.documentElement.scrollWidth - innerWidth, document.documentElement.scrollHeight - innerHeight]",
  );

describe("the card", () => {
  it("unfolds from the link that the page's own head leads to, and fits its frame", async () => {
    const text = await (await fetch(`${bench.product.url}/t/own/osier-8a`)).text();
    const found = /type="application\/json\+oembed"\s+href="([^"]+)"/.exec(text)?.[1] ?? "";
    const answer = oembedSchema.parse(await (await fetch(found.replaceAll("&amp;", "&"))).json());
    expect(answer).toMatchObject({ type: "rich", width: 640, height: 360 });
    expect(answer.html).toContain(`${address}/card`);
    for (const code of [answer.html, (await askOembed(address, "&maxwidth=400")).html]) {
      const page = await openArticle(code);
      const frame = await frameOf(page);
      const words = await frame.locator("body").innerText();
      for (const part of ["Reached at least", "unweighted, level at 1", "WARNING", "Osier 8A"]) {
        expect(words).toContain(part);
      }
      expect(await measureExcess(frame)).toEqual([0, 0]);
      expect(await frame.locator("svg.wall:visible").count()).toBe(1);
      await page.context().close();
    }
  });

  it.each([
    ["wide", { width: 640, height: 360 }, "light"],
    ["narrow", { width: 320, height: 490 }, "dark"],
  ] as const)("shuts nobody out, %s", async (_, viewport, colorScheme) => {
    const context = await browser.newContext({ viewport, colorScheme, bypassCSP: true });
    const page = await context.newPage();
    await page.goto(`${address}/card`);
    expect(await findAxeFaults(page)).toEqual([]);
    await context.close();
  });

  it("follows the reader's device unless the code fixes a theme", async () => {
    const ground = async (query: string, scheme: "light" | "dark"): Promise<string> => {
      const page = await openArticle(`<iframe src="${address}/card${query}"></iframe>`, scheme);
      const frame = await frameOf(page);
      const colour = await frame.evaluate<string>(
        "getComputedStyle(document.body).backgroundColor",
      );
      await page.context().close();
      return colour;
    };
    const [light, dark] = ["rgb(251, 253, 252)", "rgb(15, 34, 41)"];
    expect(await ground("", "light")).toBe(light);
    expect(await ground("", "dark")).toBe(dark);
    expect(await ground("?theme=light", "dark")).toBe(light);
    expect(await ground("?theme=dark", "light")).toBe(dark);
  });

  it("has its style and its fonts in a frame without an origin of its own, too", async () => {
    const page = await openArticle(
      `<iframe sandbox="allow-scripts" src="${address}/card" width="640" height="360"></iframe>`,
    );
    const frame = await frameOf(page);
    expect(
      await frame.evaluate<string[]>(
        "document.fonts.ready.then(() => [...document.fonts].map((one) => one.status))",
      ),
    ).toEqual(["loaded", "loaded", "loaded"]);
    expect(await frame.evaluate("getComputedStyle(document.body).backgroundColor")).toBe(
      "rgb(251, 253, 252)",
    );
    await page.context().close();
  });

  it("is the only thing that may be framed", async () => {
    const page = await openArticle(`<iframe src="${address}"></iframe>`);
    const frame = await frameOf(page);
    // The browser shows its own words in the frame.
    expect(await frame.locator("body").innerText()).not.toContain("Osier");
    await page.context().close();
  });
});

describe("the Summary tab", () => {
  it.each([
    ["desk", DESK],
    ["phone", PHONE],
  ])("hands out card, files and words on a %s", async (_, size) => {
    const { accountId } = bench.all.scope;
    const who = { url: bench.product.url, email: `all.${accountId.slice(0, 8)}@lab.test` };
    const lab = await signIn(browser, { ...who, password: TEST_PASSWORD }, size);
    const page = await lab.newPage();
    await page.goto(`/series/${seriesId}/summary`);
    const kit = page.getByRole("region", { name: "Take it to the article" });
    await kit.getByText(`<iframe src="${address}/card" width="640" height="360"`).waitFor();
    const words = await kit.innerText();
    expect(words).toContain("Hearing: At least 103\u00a0dB at 1\u00a0m");
    const card = kit.frameLocator('iframe[title="The card, 320 wide"]');
    await card.getByText("Reached at least").waitFor();
    for (const name of ["PNG", "SVG", "PDF, A4", "PDF, Letter", "CSV", "JSON"]) {
      const href = await kit.getByRole("link", { name, exact: true }).getAttribute("href");
      expect([name, (await fetch(href ?? "")).status]).toEqual([name, 200]);
    }
    expect(await findAxeFaults(page)).toEqual([]);
    // In its place on the page, however narrow.
    expect(await kit.evaluate((place) => place.scrollWidth - place.clientWidth)).toBe(0);
    await lab.close();
  });
});

describe("a figure of a screen", () => {
  it("is saved as SVG and PNG with its notice, its table as CSV", async () => {
    const { accountId } = bench.all.scope;
    const who = { url: bench.product.url, email: `all.${accountId.slice(0, 8)}@lab.test` };
    const lab = await signIn(browser, { ...who, password: TEST_PASSWORD }, DESK);
    const page = await lab.newPage();
    const save = async (kind: string): Promise<Buffer> => {
      const [file] = await Promise.all([
        page.waitForEvent("download"),
        page.getByRole("button", { name: kind, exact: true }).first().click(),
      ]);
      return readFile(await file.path());
    };
    for (const [view, words] of [
      ["output-limit", "compression dB"],
      ["distortion", "THD_F"],
    ] as const) {
      await page.goto(`/series/${seriesId}/${view}`);
      await page.getByText("Table of values, PNG, SVG, CSV").first().click();
      const svg = (await save("SVG")).toString();
      expect(svg).toContain("Osier 8A: ");
      expect(svg).toContain("@font-face");
      expect(svg).toContain("WARNING");
      expect(svg).not.toMatch(/NaN|light-dark/);
      const size = /width="([\d.]+)" height="([\d.]+)"/.exec(svg)?.slice(1).map(Number);
      const png = await save("PNG");
      expect([png.readUInt32BE(16), png.readUInt32BE(20)]).toEqual(
        size?.map((px) => Math.ceil(px * 2)),
      );
      const csv = (await save("CSV")).toString().split("\r\n");
      expect(csv.slice(0, 3).join(" ")).toContain("# WARNING.");
      expect(csv.filter((line) => !line.startsWith("#") && line !== "")).toHaveLength(28);
      expect(csv[3]).toContain(words);
      expect(await findAxeFaults(page)).toEqual([]);
    }
    await lab.close();
  });
});

describe("the files", () => {
  it("answer oEmbed as XML, and say what is wrong with a question", async () => {
    const ask = (query: string) => fetch(`${bench.product.url}/oembed${query}`);
    const url = encodeURIComponent(address);
    const xml = await ask(`?url=${url}&format=xml`);
    expect(xml.headers.get("content-type")).toContain("text/xml");
    expect(await xml.text()).toContain("<width>640</width>");
    expect((await ask(`?url=${url}&format=yaml`)).status).toBe(501);
    expect((await ask("")).status).toBe(400);
    expect((await ask(`?url=${url}&maxwidth=wide`)).status).toBe(400);
    expect((await ask(`?url=${encodeURIComponent(`${address}9`)}`)).status).toBe(404);
    expect((await ask("?url=https://elsewhere.example/t/own/osier-8a")).status).toBe(404);
  });

  it("are pictures, and values that come back as they were", async () => {
    const get = (file: string) => fetch(`${address}/${file}`);
    for (const [file, kind] of [
      ["figure.svg", "image/svg+xml"],
      ["figure.png?theme=dark", "image/png"],
      ["og.png", "image/png"],
      ["report.pdf?paper=letter", "application/pdf"],
    ] as const) {
      const response = await get(file);
      expect([file, response.headers.get("content-type")]).toEqual([file, kind]);
      expect(response.headers.get("cache-control")).toContain("s-maxage=60");
    }
    const json = await get("values.json");
    expect(json.headers.get("content-disposition")).toContain('filename="osier-8a-1.json"');
    const values = parseValuesJson(await json.text());
    expect(digestText(JSON.stringify(values.publication))).toBe(values.digest);
    expect(parseValuesCsv(await (await get("values.csv")).text())).toEqual(
      values.publication.bands,
    );
    expect((await get("values.xlsx")).status).toBe(404);
    expect((await get("constructor")).status).toBe(404);
  });

  it("say that a revision was replaced, then that it was withdrawn", async () => {
    const body = { supplied_by: "lent by the maker", change_note: "it was lent, not bought" };
    const next = await call(bench, publish, { params: { seriesId }, body });
    const card = async () => fetch(`${address}/card`);
    expect(await (await card()).text()).toContain("Revision 1 was replaced by revision 2 on");
    expect((await askOembed(`${bench.product.url}/t/own/osier-8a`)).html).toContain("/2/card");
    const reason = "the microphone file was the wrong one";
    await call(bench, withdrawPublication, {
      params: { publicationId: next.id },
      body: { reason },
    });
    const second = address.replace(/1$/, "2");
    const gone = await fetch(`${second}/card`);
    expect(gone.status).toBe(410);
    const text = await gone.text();
    expect(text).toContain(`withdrawn on`);
    expect(text).toContain(reason);
    expect(text).not.toContain("101");
    const csv = await fetch(`${second}/values.csv`);
    expect([csv.status, await csv.text()]).toEqual([410, expect.stringContaining(reason)]);
    expect((await askOembed(second)).thumbnail_url).toBeUndefined();
  });
});
