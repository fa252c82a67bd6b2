import { sql } from "kysely";
import { ENGINE_VERSION } from "@/lib/analysis/engine-version";
import { getHealth } from "@/lib/api/health";
import { getDatabase } from "../../_server/database";
import { handleAnyone } from "../../_server/handle";
import { getQueues } from "../../_server/queues";
import { getStore } from "../../_server/storage";

export const GET = handleAnyone(getHealth, async () => {
  const [database, queue, storage] = await Promise.all([
    answers(() => sql`select 1`.execute(getDatabase())),
    answers(async () => (await getQueues()).checks.getJobCountByTypes("waiting")),
    answers(() => getStore().freeBytes()),
  ]);
  const status = [database, queue, storage].every((part) => part === "ok") ? "ok" : "trouble";
  const body = { status, database, queue, storage, engine_version: ENGINE_VERSION } as const;
  return Response.json(getHealth.answer?.parse(body), { status: status === "ok" ? 200 : 503 });
});

/** Within a second, or it counts as trouble. */
async function answers(ask: () => Promise<unknown>): Promise<"ok" | "trouble"> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<"trouble">((resolve) => {
    timer = setTimeout(() => resolve("trouble"), 1000);
  });
  const asked = ask().then(
    () => "ok" as const,
    () => "trouble" as const,
  );
  const first = await Promise.race([asked, late]);
  clearTimeout(timer);
  return first;
}
