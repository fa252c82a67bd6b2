/** A page of the list of series over HTTP: a lab with ten thousand against a lab with a hundred. */
import { randomUUID } from "node:crypto";
import { join } from "node:path";
import { sql } from "kysely";
import { median } from "simple-statistics";
import { createDatabase } from "../../db/client";
import { inLab } from "../../db/in-lab";
import { createAccount } from "../../db/queries/accounts";
import { foundLab } from "../../db/queries/labs";
import { createLoudspeaker } from "../../db/queries/loudspeakers";
import { addMember } from "../../db/queries/members";
import { createToken } from "../../db/queries/tokens";
import { createToken as createSecretToken, digestSecret } from "../../lib/account/secrets";
import { readEnvironment, toConnectionString } from "../../lib/config/environment";
import { readText } from "../../lib/config/secrets";
import { planSchema } from "../../lib/series/plan-schema";
import { type Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { removeInstallation } from "../setup/cluster";
import { findFreePort } from "../setup/ports";
import { type ProductProcess, startProduct } from "../setup/product-process";

const dataDir = join(cloneDir, ".tidemark", "bench-list");
const REQUESTS = 41;

let product: ProductProcess | undefined;
let address = "";
let smallToken = "";
let largeToken = "";

async function setUp(): Promise<void> {
  await removeInstallation(dataDir);
  const variables = {
    TIDEMARK_DATA_DIR: dataDir,
    TIDEMARK_WEB_PORT: String(await findFreePort()),
    TIDEMARK_DB_PORT: String(await findFreePort()),
    TIDEMARK_DEMO: "0",
  };
  product = await startProduct(variables);
  const environment = readEnvironment(variables, { cloneDir, processors: 2, readText });
  address = environment.publicUrl;
  const app = createDatabase({ connectionString: toConnectionString(environment, "app") });
  const owner = createDatabase({
    connectionString: toConnectionString(environment, "migrator"),
    role: "tidemark_owner",
  });
  const fill = async (slug: string, count: number): Promise<string> => {
    const scope = { labId: randomUUID(), accountId: randomUUID() };
    await foundLab(owner, { id: scope.labId, slug, name: slug });
    const { token, prefix } = createSecretToken();
    await inLab(app, scope, async (trx) => {
      const email = `${slug}@bench.test`;
      await createAccount(trx, { id: scope.accountId, email, name: slug, passwordHash: "none" });
      await addMember(trx, { ...scope, roles: ["tester"] });
      await createToken(trx, {
        ...scope,
        name: "bench",
        tokenHash: digestSecret(token),
        prefix,
        roles: ["tester"],
        expiresAt: null,
      });
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
  };
  try {
    smallToken = await fill("small", 100);
    largeToken = await fill("large", 10_000);
    await sql`vacuum analyze series`.execute(owner);
  } finally {
    await app.destroy();
    await owner.destroy();
  }
}

async function timeList(token: string): Promise<number> {
  const start = performance.now();
  const response = await fetch(`${address}/api/v1/series`, {
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
    after: async () => {
      await product?.stop("SIGTERM");
      await removeInstallation(dataDir);
    },
  },
];
