// @ts-check
/** Folder in, JSON out: bundles the command if it is stale, then runs it in this process. */
import { fail } from "./setup/bootstrap.mjs";
import { runBundle } from "./setup/run-bundle.mjs";

runBundle("analyse").catch(fail);
