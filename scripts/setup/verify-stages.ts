/** Format, lint, types, unused code and import direction. */
import { existsSync } from "node:fs";
import { join } from "node:path";
import { z } from "zod";
import { cloneDir } from "./bootstrap.mjs";
import { packageFile } from "./package-file";
import { commandStage, type Stage } from "./stages";

const ROOMS = ["app", "components", "lib", "db", "workers", "scripts", "tests"];
const TOP_FILES = ["proxy.ts", "instrumentation.ts", "next.config.mjs", "vitest.config.ts"];

/** The import check passes when it reads nothing, so it must have read about what stands here. */
const FEWEST_MODULES = 100;

const cruiseSchema = z.object({
  modules: z.array(z.object({ source: z.string(), dependencies: z.array(z.unknown()) })),
  summary: z.object({
    violations: z.array(
      z.object({
        from: z.string(),
        to: z.string(),
        rule: z.object({ name: z.string() }),
        comment: z.string().optional(),
      }),
    ),
  }),
});

/** What the other stages build on: lint and types both read the types of the routes. */
export const routeTypes = (): Stage =>
  commandStage("route types", [packageFile("next/dist/bin/next"), "typegen"]);

/** How the code is written, and that its types hold. They read the types of the routes. */
export const typedStages = (): Stage[] => [
  commandStage("format", [packageFile("oxfmt/bin/oxfmt"), "--check", "."]),
  commandStage("lint", [packageFile("oxlint/bin/oxlint"), "--type-aware", "--deny-warnings", "."]),
  commandStage("types", [packageFile("typescript/bin/tsc"), "--noEmit"]),
];

/** Unused code, and which way imports point. */
export function importStages(): Stage[] {
  const present = [...ROOMS, ...TOP_FILES].filter((name) => existsSync(join(cloneDir, name)));
  return [
    commandStage("unused code", [packageFile("knip/bin/knip.js"), "--no-config-hints"]),
    commandStage(
      "import direction",
      [
        packageFile("dependency-cruiser/bin/dependency-cruise.mjs"),
        "--config",
        ".dependency-cruiser.mjs",
        "--output-type",
        "json",
        ...present,
      ],
      judgeCruise,
    ),
  ];
}

/** @returns every import that points the wrong way, a line each; null where all is well */
function judgeCruise(stdout: string): string | null {
  const { modules, summary } = cruiseSchema.parse(JSON.parse(stdout));
  const ours = modules.filter(({ source }) => !source.includes("node_modules/"));
  const arrows = ours.reduce((sum, { dependencies }) => sum + dependencies.length, 0);
  if (ours.length < FEWEST_MODULES || arrows < FEWEST_MODULES) {
    return `Only ${ours.length} modules with ${arrows} imports were read.`;
  }
  const wrong = summary.violations.map(
    ({ from, to, rule, comment }) => `${from} -> ${to}: ${rule.name}. ${comment ?? ""}`,
  );
  return wrong.length === 0 ? null : wrong.join("\n");
}
