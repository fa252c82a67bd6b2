/** The analyst's whole job by keyboard, and what two people at one series see of each other. */
import { randomUUID } from "node:crypto";
import type { Browser, BrowserContext, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { createAccount } from "../../db/queries/accounts";
import { addMember } from "../../db/queries/members";
import { hashPassword } from "../../lib/account/passwords";
import { decideBands, getReview } from "../../lib/api/review";
import { getSeries } from "../../lib/api/series";
import type { Role } from "../../lib/roles/roles";
import { call, openApiBench, until, type ApiBench } from "../api/support";
import { addVersion, makeReviewableSeries, type ReviewableSeries } from "../support/reviewable";
import { makeSampleResult } from "../support/sample-result";
import {
  DESK,
  findAxeFaults,
  measureOverflow,
  openBrowser,
  PHONE,
  signIn,
} from "../support/browser";

const PASSWORD = "a wall in the morning";
let bench: ApiBench;
let browser: Browser;
let made: ReviewableSeries;
let analyst: BrowserContext;
let page: Page;

beforeAll(async () => {
  bench = await openApiBench();
  browser = await openBrowser();
  made = await makeReviewableSeries(bench, bench.all.scope);
  analyst = await enter("Tomas Reith", ["analyst"]);
  page = await analyst.newPage();
}, 300_000);
afterAll(async () => {
  await browser?.close();
  await bench?.stop();
});

async function enter(name: string, roles: Role[], viewport = DESK): Promise<BrowserContext> {
  const accountId = randomUUID();
  const email = `${accountId.slice(0, 8)}@lab.test`;
  const passwordHash = await hashPassword(PASSWORD);
  await inLab(bench.app, { labId: bench.labId, accountId }, async (trx) => {
    await createAccount(trx, { id: accountId, email, name, passwordHash });
    await addMember(trx, { labId: bench.labId, accountId, roles });
  });
  return signIn(browser, { url: bench.product.url, email, password: PASSWORD }, viewport);
}

const look = (series: ReviewableSeries, on = page) =>
  on.goto(`/series/${series.seriesId}/output-limit`);
const review = (series: ReviewableSeries) =>
  call(bench, getReview, { params: { analysisId: series.analysisId } });
const focused = (on = page): Promise<string> =>
  on.evaluate<string>(
    "document.activeElement?.getAttribute('aria-label') ?? document.activeElement?.textContent ?? ''",
  );
/** Presses until the focus is on what is wanted, as somebody without a mouse would. */
async function tabTo(wanted: RegExp, most = 60): Promise<void> {
  for (let at = 0; at < most; at += 1) {
    if (wanted.test(await focused())) return;
    await page.keyboard.press("Tab");
  }
  throw new Error(`no tab stop ${String(wanted)}; the focus ended on ${await focused()}`);
}
const press = async (...keys: string[]): Promise<void> => {
  for (const key of keys) await page.keyboard.press(key);
};

describe("the analyst's job by keyboard alone", () => {
  it("confirms, changes with a reason, takes back, and goes on to the next open band", async () => {
    await look(made);
    await page.getByText("0 of 27 bands decided.").waitFor();
    expect(await findAxeFaults(page)).toEqual([]);
    await tabTo(/^[\d.]+ (kilo)?hertz: /);
    await press("Home");
    expect(await focused()).toMatch(/^40 hertz: .*no decision yet$/);
    await press("Enter");
    expect(await focused()).toBe("Confirm port Enter");
    await press("Enter");
    await page.getByText("1 of 27 bands decided.").waitFor();
    // On to 50 Hz, the focus still on the decision: a key picks another cause, which wants a reason.
    await press("2", "Enter");
    await page.getByText("Give a reason: it stands beside the decision.").waitFor();
    await page.keyboard.type("slope 0.4 in the repeat");
    await press("Enter");
    await page.getByText("2 of 27 bands decided.").waitFor();
    await page
      .getByRole("button", { name: /^50 hertz: .*compressor, changed by a person$/ })
      .waitFor();
    await press("Control+z");
    await page.getByText("1 of 27 bands decided.").waitFor();
    await page.getByRole("button", { name: /^50 hertz: .*limiter, no decision yet$/ }).waitFor();
    await press("Escape");
    expect(await focused()).toMatch(/^50 hertz: /);
  });

  it("asks for a run, which then stands among the tester's", async () => {
    await tabTo(/^Ask for a run$/);
    await press("Enter");
    const dialog = page.getByRole("dialog", { name: "Ask for a run" });
    await dialog.waitFor();
    expect(await dialog.getByLabel("level, dB").inputValue()).toBe("92");
    expect(await findAxeFaults(page)).toEqual([]);
    await dialog.getByLabel("reason").focus();
    await page.keyboard.type("narrows the onset at 50 Hz");
    await press("Tab", "Enter");
    await page.getByRole("region", { name: "Runs asked for" }).getByText("is awaited").waitFor();
    await page.goto(`/series/${made.seriesId}/runs`);
    await page.getByText("asked for by Tomas Reith: “narrows the onset at 50 Hz”").waitFor();
    await look(made);
    await page.getByText("1 of 27 bands decided.").waitFor();
  });

  it("decides a range at once, and all bands without a finding", async () => {
    await tabTo(/^[\d.]+ (kilo)?hertz: /);
    await press("Home", "ArrowRight", "Shift+ArrowRight", "Shift+ArrowRight");
    await page.getByText("What holds these 3 bands back?").waitFor();
    await press("Enter");
    expect(await focused()).toBe("Confirm 3 bands as computed Enter");
    await press("Enter");
    await page.getByText("4 of 27 bands decided.").waitFor();
    await tabTo(/^Confirm all not reached$/, 120);
    await press("Enter");
    await page
      .getByRole("button", { name: "Confirm all not reached" })
      .waitFor({ state: "detached" });
    await page.getByText("17 of 27 bands decided.").waitFor();
    expect(await focused()).toMatch(/hertz: /);
    await page.getByText("17 of 27 bands", { exact: true }).waitFor();
    expect((await review(made)).decisions.find((one) => one.nominal_Hz === 125)?.cause).toBe(
      "none",
    );
  });

  it("signs off once every band is decided, and reopens with a reason", async () => {
    expect(
      await page.getByRole("button", { name: /^Sign off for/ }).getAttribute("aria-disabled"),
    ).toBe("true");
    await tabTo(/^[\d.]+ (kilo)?hertz: /, 120);
    await press("n", "Enter");
    // Enter after Enter: each confirms and goes on to the next.
    for (let decided = 18; decided <= 27; decided += 1) {
      await press("Enter");
      await page.getByText(`${decided} of 27 bands decided.`).waitFor();
    }
    // Off until the server has every decision.
    await page.locator("button:not([aria-disabled])", { hasText: /^Sign off for/ }).waitFor();
    await tabTo(/^Sign off for THD 10.% or compression 3.dB$/, 120);
    await press("Enter");
    const dialog = page.getByRole("dialog", { name: "Sign off version 1" });
    const { decisions_digest: digest } = await review(made);
    await dialog.getByText(digest ?? "no digest").waitFor();
    expect(await findAxeFaults(page)).toEqual([]);
    await tabTo(/^Sign off$/);
    await press("Enter");
    await page.getByText(/^Signed off for THD 10.% or compression 3.dB, version 1$/).waitFor();
    await page.getByText(`decisions ${digest}`).waitFor();
    const series = await call(bench, getSeries, { params: { seriesId: made.seriesId } });
    expect(series.state).toBe("signed off");
    expect(await page.getByRole("button", { name: /^Confirm/ }).count()).toBe(0);
    expect(await findAxeFaults(page)).toEqual([]);

    await page.getByRole("button", { name: "Reopen, with a reason" }).focus();
    await press("Enter");
    await page.getByLabel("reason", { exact: true }).focus();
    await page.keyboard.type("the closing repeat was clipped");
    await press("Tab", "Enter");
    await page.getByRole("button", { name: /^Sign off for/ }).waitFor();
    await page.goto(`/series/${made.seriesId}/history`);
    await page.getByText("“the closing repeat was clipped”").waitFor();
  }, 120_000);
});

describe("with others at the same series", () => {
  it("shows both decisions where two decided the same band", async () => {
    const series = await makeReviewableSeries(bench, bench.all.scope);
    await look(series);
    await page.getByText("0 of 27 bands decided.").waitFor();
    // The other's decision is in before the page hears of it.
    await page.route("**/review", (route) => route.abort());
    await page.route("**/events", (route) => route.abort());
    await call(bench, decideBands, {
      params: { analysisId: series.analysisId },
      body: {
        decisions: [{ nominal_Hz: 50, cause: "compressor", reason: "slope 0.4", seen_version: 0 }],
      },
    });
    await page.getByRole("button", { name: /^50 hertz/ }).click();
    await page.getByRole("button", { name: "Confirm limiter" }).click();
    const both = page.getByRole("alert", { name: "Decided by two people" });
    await both.getByText(/was decided while you were looking$/).waitFor();
    await both.getByText("slope 0.4").waitFor();
    expect(await findAxeFaults(page)).toEqual([]);
    await page.unroute("**/review");
    await page.unroute("**/events");
    await both.getByLabel("reason for yours").fill("the repeat was clipped");
    await both.getByRole("button", { name: "Use mine, with a reason" }).click();
    await both.waitFor({ state: "detached" });
    await page.getByText("1 of 27 bands decided.").waitFor();
    const { decisions } = await until(
      bench,
      () => review(series),
      (answer) => answer.decisions[0]?.version === 2,
    );
    expect(decisions[0]).toMatchObject({
      version: 2,
      cause: "limiter",
      reason: "the repeat was clipped",
    });
  });

  it("keeps decisions in order while the connection is lost", async () => {
    const series = await makeReviewableSeries(bench, bench.all.scope);
    await look(series);
    await page.getByText("0 of 27 bands decided.").waitFor();
    await analyst.setOffline(true);
    await page.getByRole("button", { name: /^40 hertz/ }).click();
    for (const cause of ["port", "limiter", "limiter"]) {
      await page.getByRole("button", { name: `Confirm ${cause}` }).click();
    }
    await page.getByText("Your 3 decisions are kept here and sent when it returns.").waitFor();
    await page.getByText("3 of 27 bands decided.").waitFor();
    await page.getByText("Decisions are on their way; sign-off waits for them.").waitFor();
    expect((await review(series)).bands_decided).toBe(0);
    await analyst.setOffline(false);
    await page.getByText(/are kept here and sent/).waitFor({ state: "detached" });
    const { decisions } = await until(
      bench,
      () => review(series),
      (answer) => answer.bands_decided === 3,
    );
    expect(decisions.map((one) => [one.nominal_Hz, one.version])).toEqual([
      [40, 1],
      [50, 1],
      [63, 1],
    ]);
  });

  it("shows what a newer version changed, and keeps the decisions that still fit", async () => {
    const series = await makeReviewableSeries(bench, bench.all.scope);
    await call(bench, decideBands, {
      params: { analysisId: series.analysisId },
      body: {
        decisions: series.result.bands.map((band) => ({
          nominal_Hz: band.nominal_Hz,
          cause: band.cause,
          seen_version: 0,
        })),
      },
    });
    const newer = makeSampleResult();
    for (const band of newer.bands) if (band.nominal_Hz === 63) band.cause = "overload";
    await addVersion(bench, bench.all.scope, series, newer);
    await look(series);
    await page.getByText("1 of 27 bands changed. 26 of 27 decisions still fit").waitFor();
    await page.getByText("The band that changed").click();
    await page.getByText("limiter, now overload").waitFor();
    expect(await findAxeFaults(page)).toEqual([]);
    await page.getByRole("button", { name: "Keep 26 decisions" }).click();
    await page.getByText("26 of 27 bands decided.").waitFor();
  });

  it("tells who uploaded a run that another analyst signs", async () => {
    const own = await enter("Ines Varley", ["tester", "analyst"]);
    const hers = await own.newPage();
    await hers.goto("/series");
    const accountId = await hers.evaluate<string>(
      "fetch('/api/v1/session').then((r) => r.json()).then((s) => s.account.id)",
    );
    const series = await makeReviewableSeries(bench, { labId: bench.labId, accountId });
    await look(series, hers);
    await hers.getByRole("heading", { name: "Another analyst signs this off" }).waitFor();
    await hers.getByText(/somebody else signs off: .*Tomas Reith/).waitFor();
    expect(
      await hers.getByRole("button", { name: /^Sign off/ }).getAttribute("aria-disabled"),
    ).toBe("true");
    await own.close();
  });

  it("shows decisions without controls to who may not decide, on a phone too", async () => {
    const context = await enter("Bo Lindqvist", ["reviewer"], PHONE);
    const phone = await context.newPage();
    await look(made, phone);
    await phone.getByText("27 of 27 bands decided.").waitFor();
    await phone
      .getByText(/confirmed by Tomas Reith/)
      .first()
      .waitFor();
    for (const name of [/^Confirm/, /^Sign off/, "Ask for a run", "Comment"]) {
      expect([name, await phone.getByRole("button", { name }).count()]).toEqual([name, 0]);
    }
    expect(await measureOverflow(phone)).toBeLessThanOrEqual(0);
    expect(await findAxeFaults(phone)).toEqual([]);
    await context.close();
  });
});
