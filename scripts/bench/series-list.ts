/** A page of the list of series over HTTP: a lab with ten thousand against a lab with a hundred. */
import { join } from "node:path";
import { sql } from "kysely";
import { median } from "simple-statistics";
import { inLab } from "../../db/in-lab";
import { createLoudspeaker } from "../../db/queries/loudspeakers";
import { planSchema } from "../../lib/series/plan-schema";
import { type Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { makeBenchLab, openBenchProduct, type BenchProduct } from "./support/bench-lab";

const dataDir = join(cloneDir, ".tidemark", "bench-list");
const REQUESTS = 41;

let product: BenchProduct | undefined;
let smallToken = "";
let largeToken = "";

async function setUp(): Promise<void> {
  product = await openBenchProduct(dataDir);
  smallToken = await fill(product, "small", 100);
  largeToken = await fill(product, "large", 10_000);
  await sql`vacuum analyze series`.execute(product.owner);
}

async function fill(into: BenchProduct, slug: string, count: number): Promise<string> {
  const { scope, token } = await makeBenchLab(into, slug);
  await inLab(into.app, scope, async (trx) => {
    const loudspeakerId = await createLoudspeaker(trx, scope.labId, scope.accountId, {
      maker: "Withy",
      model: "Osier 5A",
      serial: "",
      kind: "active, two-way",
      largest_dimension_m: null,
      tuning_hz: null,
    });
    await sql`insert into series (lab_id, number, loudspeaker_id, loudspeaker_name, state, plan,
        created_by, changed_by, changed_at)
      select ${scope.labId}::uuid, n, ${loudspeakerId}::uuid, '',
        (array['planned', 'capturing', 'in review', 'signed off'])[1 + n % 4],
        ${JSON.stringify(planSchema.parse({}))}::jsonb, ${scope.accountId}::uuid,
        ${scope.accountId}::uuid, now() - n * interval '1 minute'
      from generate_series(1, ${count}::int) n`.execute(trx);
  });
  return token;
}

async function timeList(token: string): Promise<number> {
  const start = performance.now();
  const response = await fetch(`${product?.url}/api/v1/series`, {
    headers: { authorization: `Bearer ${token}` },
  });
  const text = await response.text();
  if (response.status !== 200) throw new Error(`the list answered ${response.status}: ${text}`);
  return performance.now() - start;
}

/** Both labs in turn, so that whatever else the machine does meets both. */
async function compare(): Promise<{ smallMs: number; largeMs: number }> {
  const small: number[] = [];
  const large: number[] = [];
  for (let request = 0; request < REQUESTS; request += 1) {
    small.push(await timeList(smallToken));
    large.push(await timeList(largeToken));
  }
  return { smallMs: median(small), largeMs: median(large) };
}

export const benches: Bench[] = [
  {
    key: "list.series_10000_re_100",
    name: "first page of the series list, 10,000 series against 100",
    unit: "times",
    runs: 5,
    before: async () => {
      await setUp();
      await compare();
    },
    run: async () => {
      const { smallMs, largeMs } = await compare();
      process.stderr.write(
        `  100 series: ${smallMs.toFixed(1)} ms, 10,000 series: ${largeMs.toFixed(1)} ms\n`,
      );
      return largeMs / smallMs;
    },
    after: async () => product?.stop(),
  },
];
