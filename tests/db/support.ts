/** A database with labs, people and a series, for the suites of this folder. */
import { randomUUID } from "node:crypto";
import { afterAll, beforeAll } from "vitest";
import { createDatabase, type Db } from "../../db/client";
import { inLab, type LabScope } from "../../db/in-lab";
import { createAccount } from "../../db/queries/accounts";
import { foundLab } from "../../db/queries/labs";
import { createLoudspeaker } from "../../db/queries/loudspeakers";
import { addMember } from "../../db/queries/members";
import { keepRecording } from "../../db/queries/recordings";
import { createRun } from "../../db/queries/runs";
import { createSeries } from "../../db/queries/series";
import type { Role } from "../../lib/roles/roles";
import { planSchema } from "../../lib/series/plan-schema";
import { createTestDatabase, type TestDatabase } from "../support/database";

export interface Bench {
  database: TestDatabase;
  /** As tidemark_app: what web and worker are. */
  app: Db;
  /** As the migrator in the role of the owner. */
  owner: Db;
}

/** One database for the suite; filled in by beforeAll. */
export function openDatabase(): Bench {
  const bench = {} as Bench;
  beforeAll(async () => {
    bench.database = await createTestDatabase();
    bench.app = createDatabase({ connectionString: bench.database.connectionString("app") });
    bench.owner = createDatabase({
      connectionString: bench.database.connectionString("migrator"),
      role: "tidemark_owner",
    });
  });
  afterAll(async () => {
    await bench.app.destroy();
    await bench.owner.destroy();
    await bench.database.drop();
  });
  return bench;
}

export interface Lab {
  id: string;
  /** Scope of its admin, who holds every role. */
  admin: LabScope & { accountId: string };
}

export const ALL_ROLES: Role[] = ["tester", "analyst", "reviewer", "admin"];

export async function makeLab(bench: Bench, slug: string): Promise<Lab> {
  const id = randomUUID();
  await foundLab(bench.owner, { id, slug, name: `Lab ${slug}` });
  return { id, admin: await makeMember(bench, id, `admin@${slug}.test`, ALL_ROLES) };
}

export async function makeMember(
  bench: Bench,
  labId: string,
  email: string,
  roles: Role[],
  passwordHash = "not a hash",
): Promise<LabScope & { accountId: string }> {
  const accountId = randomUUID();
  const scope = { labId, accountId };
  await inLab(bench.app, scope, async (trx) => {
    await createAccount(trx, { id: accountId, email, name: email, passwordHash });
    await addMember(trx, { labId, accountId, roles });
  });
  return scope;
}

/** A loudspeaker with one series and one run. */
export async function makeSeries(bench: Bench, lab: Lab, model = "Osier 5A") {
  return inLab(bench.app, lab.admin, async (trx) => {
    const { accountId } = lab.admin;
    const loudspeakerId = await createLoudspeaker(trx, lab.id, accountId, {
      maker: "Withy",
      model,
      serial: "1",
      kind: "active, two-way",
      largest_dimension_m: 0.4,
      tuning_hz: 52,
    });
    const series = await createSeries(trx, lab.id, accountId, {
      loudspeakerId,
      plan: planSchema.parse({}),
    });
    const digest = "ab".repeat(32);
    await keepRecording(trx, lab.id, { digest, bytes: 100, media: "audio/wav" });
    const runId = await createRun(trx, lab.id, {
      seriesId: series.id,
      slot: "short-76",
      role: "short-term",
      levelDb: 76,
      variant: null,
      fileName: "osier5a_76_short.wav",
      digest,
      channel: 1,
      uploadedBy: accountId,
      uploadedByToken: null,
    });
    return { loudspeakerId, seriesId: series.id, number: series.number, runId, digest };
  });
}
