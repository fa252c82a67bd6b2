/** Starts the database cluster of a test run and tells the suites where it is. */
import type { TestProject } from "vitest/node";
import { startTestCluster, type TestCluster } from "./test-cluster";

declare module "vitest" {
  // Vitest reads what is provided from this interface.
  interface ProvidedContext {
    cluster: TestCluster;
  }
}

export async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { databasePort, secrets, stop, endAtOnce } = await startTestCluster();
  project.provide("cluster", { databasePort, secrets });
  // Interrupted, Vitest ends without the teardown; the next run takes the files away.
  process.once("exit", endAtOnce);
  return async () => {
    process.off("exit", endAtOnce);
    await stop();
  };
}
