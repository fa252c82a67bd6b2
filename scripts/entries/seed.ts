/** Fills an empty database with the demo labs; `npm start` calls it while web and worker run. */
import { availableParallelism } from "node:os";
import { createDatabase } from "../../db/client";
import { getEnvironment, toConnectionString } from "../../lib/config/environment";
import { openQueues } from "../../lib/jobs/queues";
import { createFileStore } from "../../lib/storage/file-store";
import { stagingFolder, storeFolder } from "../../lib/storage/folders";
import { DEMO_LABS } from "../demo/demo-labs";
import { findRecordProgram, openRecorders } from "../demo/recorders";
import { seedDemo } from "../demo/seed-demo";

const MOST_RECORDERS = 4;

async function main(): Promise<boolean> {
  const environment = getEnvironment();
  const app = createDatabase({ connectionString: toConnectionString(environment, "app"), max: 4 });
  const owner = createDatabase({
    connectionString: toConnectionString(environment, "migrator"),
    max: 1,
    role: "tidemark_owner",
  });
  // A broken connection shows in the act that needs it.
  const queues = await openQueues(toConnectionString(environment, "queue"), () => undefined);
  const recorders = openRecorders(
    findRecordProgram(import.meta.url),
    Math.min(MOST_RECORDERS, availableParallelism()),
  );
  try {
    return await seedDemo({
      tools: {
        app,
        queues,
        store: createFileStore(storeFolder(environment.dataDir)),
        stagingFolder: stagingFolder(environment.dataDir),
        recorders,
        maxUploadBytes: environment.maxUploadBytes,
      },
      owner,
      dataDir: environment.dataDir,
      labs: DEMO_LABS,
      say: (line) => process.stdout.write(`${line}\n`),
    });
  } finally {
    recorders.close();
    await queues.close();
    await app.destroy();
    await owner.destroy();
  }
}

main().then(
  (done) => process.exit(done ? 0 : 1),
  (error: unknown) => {
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    process.exit(1);
  },
);
