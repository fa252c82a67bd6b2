/** A public page under load, against the static page of the same build; and its size. */
import { Agent, get } from "node:http";
import { join } from "node:path";
import { gzipSync } from "node:zlib";
import { openQueues } from "../../lib/jobs/queues";
import { toConnectionString } from "../../lib/config/environment";
import { createFileStore } from "../../lib/storage/file-store";
import { stagingFolder, storeFolder } from "../../lib/storage/folders";
import { DEMO_LABS } from "../demo/demo-labs";
import { openRecorders } from "../demo/recorders";
import { seedDemo } from "../demo/seed-demo";
import type { Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { bundlePath } from "../setup/bundles.mjs";
import { openBenchProduct, type BenchProduct } from "./support/bench-lab";

const dataDir = join(cloneDir, ".tidemark", "bench-public");
const PUBLISHED = "/published";
/** Made when the product is built. */
const STATIC = "/how-we-measure";
const CONNECTIONS = 16;
const WINDOW_MS = 1500;
/** Both in turn, so that whatever else the machine does meets both. */
const TURNS = 3;

let product: BenchProduct | undefined;
let page = "";

/** One demo series, recorded, analysed, signed off and published as any other. */
async function setUp(): Promise<void> {
  product = await openBenchProduct(dataDir);
  const { app, owner, environment } = product;
  const queues = await openQueues(toConnectionString(environment, "queue"), () => undefined);
  const recorders = openRecorders(bundlePath("record-demo"), 2);
  try {
    const lab = DEMO_LABS[0];
    const series = lab?.series.find((one) => one.published !== null);
    if (lab === undefined || series === undefined) throw new Error("the demo publishes nothing");
    const done = await seedDemo({
      tools: {
        app,
        queues,
        store: createFileStore(storeFolder(dataDir)),
        stagingFolder: stagingFolder(dataDir),
        recorders,
        maxUploadBytes: environment.maxUploadBytes,
      },
      owner,
      dataDir,
      labs: [{ ...lab, series: [series] }],
      say: (line) => process.stderr.write(`  ${line}\n`),
    });
    if (!done) throw new Error("the demo series was not published");
  } finally {
    recorders.close();
    await queues.close();
  }
  const list = await read(PUBLISHED);
  page = /href="(\/t\/[^"]+)"/.exec(list)?.[1] ?? "";
  if (page === "") throw new Error("the list of published tests is empty");
}

async function read(path: string): Promise<string> {
  const response = await fetch(`${product?.url}${path}`);
  if (response.status !== 200) throw new Error(`${path} answered ${response.status}`);
  return response.text();
}

/** One request to its last byte. */
const ask = (agent: Agent, path: string): Promise<void> =>
  new Promise((resolve, reject) => {
    const request = get(`${product?.url}${path}`, { agent }, (response) => {
      if (response.statusCode !== 200) reject(new Error(`${path}: ${response.statusCode}`));
      response.on("end", resolve).on("error", reject).resume();
    });
    request.on("error", reject);
  });

/** @returns answers a second over some connections that are kept. */
async function measureRate(path: string): Promise<number> {
  const agent = new Agent({ keepAlive: true, maxSockets: CONNECTIONS });
  const from = performance.now();
  let answers = 0;
  const work = async (): Promise<void> => {
    while (performance.now() - from < WINDOW_MS) {
      await ask(agent, path);
      answers += 1;
    }
  };
  await Promise.all(Array.from({ length: CONNECTIONS }, work));
  const seconds = (performance.now() - from) / 1000;
  agent.destroy();
  return answers / seconds;
}

async function compare(): Promise<{ pageRate: number; staticRate: number }> {
  let [pageSum, staticSum] = [0, 0];
  for (let turn = 0; turn < TURNS; turn += 1) {
    pageSum += await measureRate(page);
    staticSum += await measureRate(STATIC);
  }
  return { pageRate: pageSum / TURNS, staticRate: staticSum / TURNS };
}

const end = async (): Promise<void> => product?.stop();

export const benches: Bench[] = [
  {
    key: "reader.page_re_static",
    name: "requests a second of a public page, against a static page of the same build",
    unit: "times",
    runs: 5,
    before: async () => {
      await setUp();
      await compare();
    },
    run: async () => {
      const { pageRate, staticRate } = await compare();
      process.stderr.write(
        `  public page: ${pageRate.toFixed(0)} a second, static page: ${staticRate.toFixed(0)} a second\n`,
      );
      return pageRate / staticRate;
    },
    after: end,
  },
  {
    key: "reader.page_kb",
    name: "HTML of a public page, gzipped",
    unit: "kB",
    runs: 1,
    before: setUp,
    run: async () => gzipSync(await read(page)).length / 1000,
    after: end,
  },
];
