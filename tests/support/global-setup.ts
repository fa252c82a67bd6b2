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
  const { databasePort, secrets, stop } = await startTestCluster();
  project.provide("cluster", { databasePort, secrets });
  // Interrupted, Vitest would end without the teardown and leave the server running.
  const interrupted = (): void => void stop().finally(() => process.exit(130));
  for (const name of ["SIGINT", "SIGTERM"] as const) process.once(name, interrupted);
  return stop;
}
