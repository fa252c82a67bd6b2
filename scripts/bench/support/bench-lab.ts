/** A product of its own for a bench, and labs in it whose only member works by token. */
import { randomUUID } from "node:crypto";
import { createDatabase, type Db } from "../../../db/client";
import { inLab, type LabScope } from "../../../db/in-lab";
import { createAccount } from "../../../db/queries/accounts";
import { foundLab } from "../../../db/queries/labs";
import { addMember } from "../../../db/queries/members";
import { createToken } from "../../../db/queries/tokens";
import { createToken as createSecretToken, digestSecret } from "../../../lib/account/secrets";
import {
  readEnvironment,
  toConnectionString,
  type Environment,
} from "../../../lib/config/environment";
import { readText } from "../../../lib/config/secrets";
import { cloneDir } from "../../setup/bootstrap.mjs";
import { removeInstallation } from "../../setup/cluster";
import { findFreePort } from "../../setup/ports";
import { startProduct } from "../../setup/product-process";

export interface BenchProduct {
  /** Address of the web server. */
  url: string;
  /** Of its web and worker. */
  environment: Environment;
  app: Db;
  owner: Db;
  /** Ends it and takes its data away. */
  stop: () => Promise<void>;
}

/** @param dataDir emptied first. */
export async function openBenchProduct(dataDir: string): Promise<BenchProduct> {
  await removeInstallation(dataDir);
  const variables = {
    TIDEMARK_DATA_DIR: dataDir,
    TIDEMARK_WEB_PORT: String(await findFreePort()),
    TIDEMARK_DB_PORT: String(await findFreePort()),
    TIDEMARK_DEMO: "0",
  };
  const product = await startProduct(variables);
  const environment = readEnvironment(variables, { cloneDir, processors: 2, readText });
  const app = createDatabase({ connectionString: toConnectionString(environment, "app") });
  const owner = createDatabase({
    connectionString: toConnectionString(environment, "migrator"),
    role: "tidemark_owner",
  });
  return {
    url: environment.publicUrl,
    environment,
    app,
    owner,
    stop: async () => {
      await app.destroy();
      await owner.destroy();
      await product.stop("SIGTERM");
      await removeInstallation(dataDir);
    },
  };
}

/** @returns the lab, and the token of its tester. */
export async function makeBenchLab(
  { app, owner }: BenchProduct,
  slug: string,
): Promise<{ scope: LabScope & { accountId: string }; token: string }> {
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
  });
  return { scope, token };
}
