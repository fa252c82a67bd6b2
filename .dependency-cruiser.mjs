// @ts-check
/** Which way imports point, as drawn in DEVELOPERS.md. Tests may reach into any room.
 * Circles are the linter's business: it can tell an import of types from one of values. */

const test = "\\.test\\.tsx?$|^tests/";

/**
 * @param {string} name
 * @param {string} from files that the rule binds
 * @param {string} to what they must not import
 * @param {string} why
 * @returns {import("dependency-cruiser").IForbiddenRuleType}
 */
const arrow = (name, from, to, why) => ({
  name,
  severity: "error",
  comment: why,
  from: { path: from, pathNot: test },
  to: { path: to },
});

/** @type {import("dependency-cruiser").IConfiguration} */
export default {
  forbidden: [
    arrow(
      "lib-stands-alone",
      "^lib/",
      "^(app|components|db|workers|scripts|tests)/",
      "lib holds plain functions: stored facts, clock and randomness arrive as arguments",
    ),
    arrow(
      "analysis-is-pure",
      "^lib/analysis/",
      "node_modules/(react|react-dom|next|next-auth|kysely|pg|bullmq)/|^(fs|net|http|https|child_process|worker_threads)(/|$)",
      "the engine computes and does no input or output",
    ),
    arrow(
      "db-to-lib-only",
      "^db/",
      "^(app|components|workers|scripts|tests)/",
      "db reads and writes rows; it knows types and errors of lib",
    ),
    arrow(
      "components-to-lib-only",
      "^components/",
      "^(app|db|workers|scripts|tests)/|node_modules/(kysely|pg|bullmq)/",
      "components run in the browser: they never reach the database or the queue",
    ),
    arrow(
      "workers-to-db-and-lib",
      "^workers/",
      "^(app|components|scripts|tests)/|node_modules/(next|next-auth|react|react-dom)/",
      "the worker is a process of its own, apart from the web server",
    ),
    arrow(
      "app-not-to-processes",
      "^(app|proxy\\.ts|instrumentation\\.ts)",
      "^(workers|scripts|tests)/",
      "web and worker meet at lib/jobs only",
    ),
    arrow("scripts-not-to-tests", "^scripts/", "^tests/", "scripts run without the test packages"),
    {
      name: "scripts-imported-by-nobody",
      severity: "error",
      comment: "scripts import everything and are imported by tests alone",
      from: { pathNot: "^(scripts|tests)/" },
      to: { path: "^scripts/" },
    },
    {
      name: "nothing-imports-tests",
      severity: "error",
      comment: "product code must run without its tests",
      from: { pathNot: test },
      to: { path: test },
    },
    {
      name: "no-unresolved",
      severity: "error",
      comment: "an import that leads nowhere",
      from: {},
      to: { couldNotResolve: true },
    },
    {
      name: "no-dev-packages-in-product",
      severity: "error",
      comment: "what the product runs on stands in dependencies",
      from: { path: "^(app|components|lib|db|workers)/", pathNot: test },
      to: { dependencyTypes: ["npm-dev"], dependencyTypesNot: ["npm"] },
    },
  ],
  options: {
    doNotFollow: { path: "node_modules" },
    exclude: { path: "^(\\.next|build|\\.tidemark)/|^next-env\\.d\\.ts$" },
    tsConfig: { fileName: "tsconfig.json" },
    tsPreCompilationDeps: true,
    enhancedResolveOptions: {
      exportsFields: ["exports"],
      conditionNames: ["import", "require", "node", "default", "types"],
      extensions: [".ts", ".tsx", ".mjs", ".js", ".cjs", ".json", ".d.ts"],
    },
  },
};
