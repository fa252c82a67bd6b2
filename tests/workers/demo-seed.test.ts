/** The seed of the demo labs: interrupted and taken up again, and held against uploads by hand. */
import { existsSync, statSync } from "node:fs";
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { asAccount, inLab } from "../../db/in-lab";
import { findPasswordHash } from "../../db/queries/accounts";
import { listAllLabs } from "../../db/queries/labs";
import { findMemberByEmail } from "../../db/queries/members";
import { verifyPassword } from "../../lib/account/passwords";
import { getResult } from "../../lib/api/analyses";
import { requestApi } from "../../lib/api/client";
import { createLoudspeaker, listLoudspeakers } from "../../lib/api/loudspeakers";
import { listRuns } from "../../lib/api/runs";
import { createSeries, getSeries, listSeries } from "../../lib/api/series";
import { openQueues, type Queues } from "../../lib/jobs/queues";
import { createFileStore } from "../../lib/storage/file-store";
import { stagingFolder, storeFolder } from "../../lib/storage/folders";
import { DEMO_LABS, type DemoLab, type DemoSeries } from "../../scripts/demo/demo-labs";
import { recordSeries } from "../../scripts/demo/record-series";
import { openRecorders, type Recorders } from "../../scripts/demo/recorders";
import { seedDemo } from "../../scripts/demo/seed-demo";
import { beginSeed, isUnderWay } from "../../scripts/demo/seed-state";
import { bundlePath } from "../../scripts/setup/bundles.mjs";
import { readSignIns, signInsPath } from "../../scripts/setup/demo-sign-ins";
import { call, openApiBench, seriesInState, target, type ApiBench } from "../api/support";
import { measureOverflow, openBrowser, PHONE, signIn } from "../support/browser";
import { makeTestMember } from "../support/lab-bench";
import { uploadWhole } from "../support/tus";

const northPier = DEMO_LABS.find(({ slug }) => slug === "northpier");
if (northPier === undefined) throw new Error("there is no second demo lab");
const lab: DemoLab = northPier;

let bench: ApiBench;
let queues: Queues;
let recorders: Recorders;
beforeAll(async () => {
  bench = await openApiBench();
  queues = await openQueues(bench.database.connectionString("queue"), () => undefined);
  recorders = openRecorders(bundlePath("record-demo"), 2);
});
afterAll(async () => {
  recorders.close();
  await queues.close();
  await bench.stop();
});

/** @param record stands in for the processes that make recordings. */
async function seed(record = recorders.record): Promise<{ done: boolean; said: string }> {
  const { dataDir } = bench.product;
  const lines: string[] = [];
  const done = await seedDemo({
    tools: {
      app: bench.app,
      queues,
      store: createFileStore(storeFolder(dataDir)),
      stagingFolder: stagingFolder(dataDir),
      recorders: { ...recorders, record },
      maxUploadBytes: 400e6,
    },
    owner: bench.owner,
    dataDir,
    labs: [lab],
    say: (line) => lines.push(line),
  });
  return { done, said: lines.join("\n") };
}

const findLabId = async (): Promise<string | undefined> =>
  (await listAllLabs(bench.owner)).find(({ slug }) => slug === lab.slug)?.id;

/** What a member of the seeded lab sees of it. */
async function look(token: string) {
  const { series } = await call(bench, listSeries, { query: {} }, token);
  const { loudspeakers } = await call(bench, listLoudspeakers, { query: {} }, token);
  const runs = await Promise.all(
    series.map(
      async ({ id }) => (await call(bench, listRuns, { params: { seriesId: id } }, token)).runs,
    ),
  );
  return { series, loudspeakers: loudspeakers.length, runs };
}

describe("the seed of the demo labs", () => {
  it("leaves a database alone that somebody else has begun to fill", async () => {
    expect(await seed()).toEqual({ done: true, said: "" });
    expect(await findLabId()).toBeUndefined();
    expect(existsSync(signInsPath(bench.product.dataDir))).toBe(false);
  });

  it("goes on after an interruption, doubles nothing, and then leaves well alone", async () => {
    const { dataDir } = bench.product;
    const password = beginSeed(dataDir, [lab]);
    let made = 0;
    const breaksOff: Recorders["record"] = (job) => {
      made += 1;
      if (made > 4) return Promise.reject(new Error("the recorder was switched off"));
      return recorders.record(job);
    };
    const first = await seed(breaksOff);
    expect(first.done).toBe(false);
    expect(first.said).toContain("Not done: the recorder was switched off");
    expect(isUnderWay(dataDir)).toBe(true);

    expect((await seed()).done).toBe(true);
    expect(isUnderWay(dataDir)).toBe(false);
    const labId = (await findLabId()) ?? "";
    const { token } = await makeTestMember(bench, labId, "looker", ["tester"]);
    const seen = await look(token);
    expect(seen.loudspeakers).toBe(lab.series.length);
    expect(seen.series.map(({ state }) => state).sort()).toEqual(["analysis failed", "signed off"]);
    const published = await (await fetch(`${bench.product.url}/published`)).text();
    expect(published).toContain("/t/northpier/ketch-12");
    const slots = seen.runs.map((runs) => runs.map(({ slot, take }) => `${slot} ${take}`));
    const planned = lab.series.map((one) => recordSeries(one).map(({ run }) => `${run.slot} 1`));
    expect(new Set(slots.map((one) => one.toSorted().join()))).toEqual(
      new Set(planned.map((one) => one.toSorted().join())),
    );

    expect(await seed()).toEqual({ done: true, said: "" });
    expect(await look(token)).toEqual(seen);

    expect(readSignIns(dataDir).map((row) => [row.email, row.password, row.roles])).toEqual(
      lab.members.map(({ email, roles }) => [email, password, roles]),
    );
    expect(statSync(signInsPath(dataDir)).mode & 0o777).toBe(0o600);
    await expectSignIns(labId, password);
  });

  it("gives the very rows that its files give when they are uploaded by hand", async () => {
    const labId = (await findLabId()) ?? "";
    const { token } = await makeTestMember(bench, labId, "comparer", ["tester"]);
    const found = (await look(token)).series.find(({ state }) => state === "signed off");
    const params = { seriesId: found?.id ?? "" };
    const seeded = await call(bench, getSeries, { params }, token);
    const series = getWhole(lab);
    const byHand = await uploadByHand(series);
    const runs = await Promise.all([
      listRunFacts(seeded.id, token),
      listRunFacts(byHand.id, bench.all.token),
    ]);
    expect(runs[0]).toHaveLength(recordSeries(series).length);
    expect(runs[1]).toEqual(runs[0]);
    const [seededText, text] = await Promise.all([
      readResult(seeded.latest_done_analysis?.id ?? "", token),
      readResult(byHand.latest_done_analysis?.id ?? "", bench.all.token),
    ]);
    expect(text.length).toBeGreaterThan(10_000);
    expect(text).toBe(seededText);
  });
});

describe("the seeded lab in a browser", () => {
  let browser: Browser;
  beforeAll(async () => {
    browser = await openBrowser();
  });
  afterAll(() => browser.close());

  it.each(lab.members.map(({ email, roles }) => [roles.join(" and "), email]))(
    "shows its screens to %s on a phone, whole and without a fault",
    async (_roles, email) => {
      const password = readSignIns(bench.product.dataDir)[0]?.password ?? "";
      const { url } = bench.product;
      const context = await signIn(browser, { url, email, password }, PHONE);
      const faults: string[] = [];
      const page = await context.newPage();
      page.on("pageerror", (error) => faults.push(`${page.url()}: ${error.message}`));
      page.on("console", (message) => {
        if (message.type() === "error") faults.push(`${page.url()}: ${message.text()}`);
      });
      await page.goto("/series");
      const results = page.getByRole("link", { name: /Ketch 12/ });
      await results.first().waitFor();
      const addresses = await results.evaluateAll((links) =>
        links.map((link) => link.getAttribute("href") ?? ""),
      );
      expect(addresses).toHaveLength(lab.series.length);
      for (const address of addresses) {
        const series = address.replace(/(\/series\/[^/]+).*/, "$1");
        for (const screen of ["output-limit", "distortion", "runs"]) {
          await page.goto(`${series}/${screen}`, { waitUntil: "networkidle" });
          await page.getByRole("heading", { name: "Ketch 12" }).waitFor();
          const wider = await measureOverflow(page);
          if (wider > 0) faults.push(`${page.url()}: ${wider} px wider than the phone`);
        }
      }
      await context.close();
      expect(faults).toEqual([]);
    },
  );
});

async function expectSignIns(labId: string, password: string): Promise<void> {
  for (const { email, roles } of lab.members) {
    const scope = { labId, accountId: null };
    const member = await inLab(bench.app, scope, (trx) => findMemberByEmail(trx, labId, email));
    expect(member?.roles).toEqual(roles);
    const accountId = member?.accountId ?? "";
    const hash = await asAccount(bench.app, accountId, (trx) => findPasswordHash(trx, accountId));
    expect(await verifyPassword(hash, password)).toBe(true);
  }
}

function getWhole({ series }: DemoLab): DemoSeries {
  const whole = series.find(({ mishaps }) => Object.keys(mishaps).length === 0);
  if (whole === undefined) throw new Error("the lab has no series without a mishap");
  return whole;
}

async function uploadByHand(series: DemoSeries) {
  const body = series.loudspeaker;
  const { id } = await call(bench, createLoudspeaker, { body });
  const planned = await call(bench, createSeries, {
    body: { loudspeaker_id: id, plan: series.plan },
  });
  for (const { run, makeWav } of recordSeries(series)) {
    const metadata = { seriesId: planned.id, fileName: run.fileName };
    await uploadWhole(target(bench), makeWav(), metadata);
  }
  return seriesInState(bench, planned.id, "in review", "analysis failed");
}

async function listRunFacts(seriesId: string, token: string) {
  const { runs } = await call(bench, listRuns, { params: { seriesId } }, token);
  return runs
    .map(({ slot, state, digest, file_name }) => ({ slot, state, digest, file_name }))
    .sort((a, b) => a.file_name.localeCompare(b.file_name));
}

const readResult = async (analysisId: string, token: string): Promise<string> =>
  (
    await requestApi(getResult, { params: { analysisId } }, { baseUrl: bench.product.url, token })
  ).text();
