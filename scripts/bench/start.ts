/** From `npm start` to the line that says it is ready, everything being made already. */
import { join } from "node:path";
import { type Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { removeInstallation } from "../setup/cluster";
import { startProduct } from "../setup/product-process";
import { findFreePort } from "../setup/ports";

const dataDir = join(cloneDir, ".tidemark", "bench");

async function startAndStop(): Promise<number> {
  const product = await startProduct({
    TIDEMARK_DATA_DIR: dataDir,
    TIDEMARK_WEB_PORT: String(await findFreePort()),
    TIDEMARK_DB_PORT: String(await findFreePort()),
    TIDEMARK_DEMO: "0",
  });
  await product.stop("SIGTERM");
  return product.readyAfterMs / 1000;
}

export const benches: Bench[] = [
  {
    key: "second_start_s",
    name: "second npm start until ready",
    unit: "s",
    runs: 5,
    before: async () => {
      await removeInstallation(dataDir);
      await startAndStop();
    },
    run: startAndStop,
    after: () => removeInstallation(dataDir),
  },
];
