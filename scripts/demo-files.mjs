// @ts-check
/** The recordings of a demo series as files. */
import { fail } from "./setup/bootstrap.mjs";
import { runBundle } from "./setup/run-bundle.mjs";

runBundle("demo-files", ["record-demo"]).catch(fail);
