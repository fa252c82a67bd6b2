/** A capture through the API, web and worker as they run in earnest: how soon a tester hears of it. */
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { median } from "simple-statistics";
import { getResult } from "../../lib/api/analyses";
import { callApi, requestApi } from "../../lib/api/client";
import { createLoudspeaker } from "../../lib/api/loudspeakers";
import { UPLOADS_PATH, getRun } from "../../lib/api/runs";
import { createSeries, getSeries } from "../../lib/api/series";
import { planSchema, type PlanInput } from "../../lib/series/plan-schema";
import { DEMO_LABS } from "../demo/demo-labs";
import { recordSeries } from "../demo/record-series";
import type { Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { makeBenchLab, openBenchProduct, type BenchProduct } from "./support/bench-lab";

const dataDir = join(cloneDir, ".tidemark", "bench-capture");
/** Four runs whose files last 15 s. */
const PLAN: PlanInput = {
  sweep: { length_s: 13, lead_in_s: 1, lead_out_s: 1 },
  calibration: { by: "calibrator" },
  closing: false,
};
const ASK_EVERY_MS = 10;
const CAPTURES = 3;
const LONGEST_MS = 60_000;

interface BenchFile {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
  isRun: boolean;
}

interface Capture {
  checkS: number;
  resultS: number;
}

let product: BenchProduct | undefined;
/** Each gives both figures: what one bench has made, the other reads. */
const captures: Capture[] = [];
let token = "";
let files: BenchFile[] = [];

const loudspeaker = DEMO_LABS[0]?.series[0];

async function setUp(): Promise<void> {
  if (captures.length === CAPTURES) return;
  if (loudspeaker === undefined) throw new Error("the demo labs have no series any more");
  files = recordSeries({
    ...loudspeaker,
    plan: planSchema.parse(PLAN),
    recorded: "all",
    mishaps: {},
  }).map(({ run, makeWav }) => ({
    name: run.fileName,
    bytes: makeWav(),
    isRun: run.slot.startsWith("short"),
  }));
  product = await openBenchProduct(dataDir);
  token = (await makeBenchLab(product, "capture")).token;
  await capture();
}

async function waitFor<T>(ask: () => Promise<T>, wanted: (answer: T) => boolean): Promise<T> {
  const until = performance.now() + LONGEST_MS;
  for (;;) {
    const answer = await ask();
    if (wanted(answer)) return answer;
    if (performance.now() > until) throw new Error(`never came: ${JSON.stringify(answer)}`);
    await sleep(ASK_EVERY_MS);
  }
}

/** Creation and bytes, as tus 1.0 has them. @returns the id of the run. */
async function upload({ name, bytes }: BenchFile, url: string, seriesId: string): Promise<string> {
  const common = { "tus-resumable": "1.0.0", authorization: `Bearer ${token}` };
  const metadata = Object.entries({ seriesId, fileName: name }).map(
    ([key, value]) => `${key} ${Buffer.from(value).toString("base64")}`,
  );
  const created = await fetch(`${url}${UPLOADS_PATH}`, {
    method: "POST",
    headers: {
      ...common,
      "upload-length": String(bytes.length),
      "upload-metadata": metadata.join(","),
    },
  });
  const location = created.headers.get("location");
  if (location === null) throw new Error(`creation: ${created.status} ${await created.text()}`);
  const sent = await fetch(`${url}${location}`, {
    method: "PATCH",
    headers: {
      ...common,
      "upload-offset": "0",
      "content-type": "application/offset+octet-stream",
    },
    body: bytes,
  });
  const runId = sent.headers.get("tidemark-run-id");
  if (runId === null) throw new Error(`upload: ${sent.status} ${await sent.text()}`);
  return runId;
}

/** Uploads every file; from the start of the last one's upload to the result, and the checks of the others. */
async function capture(): Promise<Capture> {
  if (product === undefined || loudspeaker === undefined) throw new Error("there is no product");
  const options = { baseUrl: product.url, token };
  const made = await callApi(createLoudspeaker, { body: loudspeaker.loudspeaker }, options);
  const body = { loudspeaker_id: made.id, plan: PLAN };
  const { id: seriesId } = await callApi(createSeries, { body }, options);
  const checksMs: number[] = [];
  let from = 0;
  for (const file of files) {
    from = performance.now();
    const runId = await upload(file, product.url, seriesId);
    if (file === files.at(-1)) break;
    const ask = () => callApi(getRun, { params: { runId } }, options);
    await waitFor(ask, ({ report }) => report !== null);
    if (file.isRun) checksMs.push(performance.now() - from);
  }
  const ask = () => callApi(getSeries, { params: { seriesId } }, options);
  const { latest_done_analysis: done } = await waitFor(
    ask,
    ({ latest_done_analysis: analysis }) => analysis !== null,
  );
  const params = { analysisId: done?.id ?? "" };
  await (await requestApi(getResult, { params }, options)).text();
  return { checkS: median(checksMs) / 1000, resultS: (performance.now() - from) / 1000 };
}

function toBench(figure: keyof Capture, key: string, name: string): Bench {
  let read = 0;
  return {
    key,
    name,
    unit: "s",
    runs: CAPTURES,
    before: setUp,
    run: async () => {
      const known = captures[read] ?? (await capture());
      captures[read] = known;
      read += 1;
      return known[figure];
    },
    after: async () => {
      await product?.stop();
      product = undefined;
    },
  };
}

export const benches: Bench[] = [
  toBench(
    "resultS",
    "capture.result_s",
    "from the start of the last upload of four runs of 15 s to their result by the API",
  ),
  toBench(
    "checkS",
    "capture.arrival_check_s",
    "from the start of the upload of 15 s to its arrival report by the API",
  ),
];
