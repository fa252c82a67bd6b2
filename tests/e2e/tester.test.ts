import { randomUUID } from "node:crypto";
import { readFileSync } from "node:fs";
import type { Browser, BrowserContext, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { createAccount } from "../../db/queries/accounts";
import { addMember } from "../../db/queries/members";
import { hashPassword } from "../../lib/account/passwords";
import { getSeries } from "../../lib/api/series";
import { DEMO_LABS } from "../../scripts/demo/demo-labs";
import { recordSeries } from "../../scripts/demo/record-series";
import { call, openApiBench, type ApiBench } from "../api/support";
import {
  DESK,
  findAxeFaults,
  measureOverflow,
  openBrowser,
  PHONE,
  signIn,
} from "../support/browser";

const PASSWORD = "a sweep in the evening";
let bench: ApiBench;
let browser: Browser;
let email: string;
let desk: BrowserContext;
let page: Page;
let seriesId: string;

beforeAll(async () => {
  bench = await openApiBench();
  const accountId = randomUUID();
  email = `tester.${accountId.slice(0, 8)}@lab.test`;
  const passwordHash = await hashPassword(PASSWORD);
  await inLab(bench.app, { labId: bench.labId, accountId }, async (trx) => {
    await createAccount(trx, { id: accountId, email, name: "Ines Varley", passwordHash });
    await addMember(trx, { labId: bench.labId, accountId, roles: ["tester"] });
  });
  browser = await openBrowser();
  desk = await signIn(browser, { url: bench.product.url, email, password: PASSWORD }, DESK);
  page = await desk.newPage();
}, 300_000);
afterAll(async () => {
  await browser?.close();
  await bench?.stop();
});

describe("the tester's way from plan to verdicts", () => {
  it("plans a series, is told of faults and of the level", async () => {
    await page.goto("/series");
    await page.getByRole("heading", { name: "No series yet" }).waitFor();
    expect(await findAxeFaults(page)).toEqual([]);
    await page.getByRole("link", { name: "New series" }).click();
    const form = page.getByRole("form", { name: "Plan" });
    await form.getByLabel("maker", { exact: true }).fill("Stonecrop Works");
    await form.getByLabel("model", { exact: true }).fill("Bracken Mini");
    await form.getByRole("button", { name: "Remove level 4" }).click();
    await form.getByRole("button", { name: "Remove level 3" }).click();
    await form.getByLabel("length, s").fill("2");
    await form.getByLabel("distance, m").fill("0");
    await form.getByLabel("temperature, °C").focus();
    await page.getByText("Distance must be from 0.25 to 10 m.").waitFor();
    await form.getByLabel("distance, m").fill("1,0");
    const aside = page.getByRole("complementary", { name: "What the plan implies" });
    await aside.getByText("86 dB(A) where you stand.").waitFor();
    expect(await aside.getByRole("note").textContent()).toContain("CAUTION");
    expect(await findAxeFaults(page)).toEqual([]);
    await form.getByRole("button", { name: "Save", exact: true }).click();
    await page.waitForURL(/\/series\/[0-9a-f-]{36}\/plan$/);
    seriesId = page.url().split("/").at(-2) ?? "";
  });

  it("downloads a stimulus that is a whole 24-bit WAV", async () => {
    const [download] = await Promise.all([
      page.waitForEvent("download"),
      page.getByRole("link", { name: "brackenmini_76_short.wav" }).click(),
    ]);
    const bytes = readFileSync(await download.path());
    expect(bytes.toString("latin1", 0, 4)).toBe("RIFF");
    expect(bytes.readUInt32LE(4) + 8).toBe(bytes.length);
    expect(bytes.readUInt16LE(34)).toBe(24);
  });

  it("sends the recordings, sees a clipped one and keeps it with a reason", async () => {
    await page.getByRole("link", { name: "Runs", exact: true }).click();
    await page.getByRole("heading", { name: "Drop run files here" }).waitFor();
    const files = await makeRecordings({ "short-86": { kind: "bump", atS: 2, keptBecause: null } });
    await page.getByLabel("Choose files").setInputFiles(files);
    const table = page.getByRole("table", { name: "Planned runs and their recordings" });
    await table.getByText("clipped input").waitFor({ timeout: 60_000 });
    await table.getByText(/The input clipped on/).waitFor();
    expect(await findAxeFaults(page)).toEqual([]);

    await table.getByRole("button", { name: "Keep it, with a reason" }).click();
    const dialog = page.getByRole("dialog");
    await dialog.getByRole("button", { name: "Keep it" }).click();
    await dialog.getByText("Give a reason.").waitFor();
    await dialog.getByLabel("reason").fill("The bump lies above the band in question.");
    await dialog.getByRole("button", { name: "Keep it" }).click();
    await table.getByText("clipped input, kept").waitFor();
    await table.getByText("Kept: “The bump lies above the band in question.”").waitFor();
    await page.getByText("All recordings are in.").waitFor();
    await page.getByRole("link", { name: "see the output limit" }).waitFor({ timeout: 60_000 });
  });

  it("finds the reason in the history", async () => {
    await page.getByRole("link", { name: "History", exact: true }).click();
    await page.getByText("“The bump lies above the band in question.”").waitFor();
    expect(await findAxeFaults(page)).toEqual([]);
  });

  it("reads the plan once a recording is in, and prints its check-list", async () => {
    await page.getByRole("link", { name: "Plan", exact: true }).click();
    await page.getByText("The plan is fixed: a recording is in.").waitFor();
    await page.getByRole("link", { name: "Print" }).click();
    await page.getByRole("heading", { name: "Capture check-list" }).waitFor();
    expect(await page.getByText("Gain set once on the 76").count()).toBe(1);
    expect(await findAxeFaults(page)).toEqual([]);
  });
});

describe("on a phone", () => {
  it.each([
    ["the list", () => "/series", "Bracken Mini"],
    ["the plan", () => `/series/${seriesId}/plan`, "What this plan implies"],
    ["the runs", () => `/series/${seriesId}/runs`, "Drop run files here"],
    ["a new series", () => "/series/new", "What this plan implies"],
    ["the loudspeakers", () => "/loudspeakers", "Bracken Mini"],
  ])("%s fits the window and is clean", async (_name, toPath, words) => {
    const phone = await signIn(
      browser,
      { url: bench.product.url, email, password: PASSWORD },
      PHONE,
    );
    try {
      const view = await phone.newPage();
      await view.goto(toPath());
      await view.getByText(words).locator("visible=true").first().waitFor();
      expect(await measureOverflow(view)).toBeLessThanOrEqual(0);
      expect(await findAxeFaults(view)).toEqual([]);
    } finally {
      await phone.close();
    }
  });
});

/** What the invented loudspeaker gives for the plan as it was saved. */
async function makeRecordings(mishaps: (typeof DEMO_LABS)[number]["series"][number]["mishaps"]) {
  const model = DEMO_LABS.flatMap((lab) => lab.series).find((s) => s.key === "brackenMini");
  if (model === undefined) throw new Error("the demo labs have no Bracken Mini any more");
  const { plan } = await call(bench, getSeries, { params: { seriesId } });
  return recordSeries({ ...model, plan, recorded: "all", mishaps }).map(({ run, makeWav }) => ({
    name: run.fileName,
    mimeType: "audio/wav",
    buffer: Buffer.from(makeWav()),
  }));
}
