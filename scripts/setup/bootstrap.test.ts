import { describe, expect, it } from "vitest";
import { matchesLock, nodeProblem } from "./bootstrap.mjs";

describe("nodeProblem", () => {
  it.each(["20.19.0", "20.20.2", "22.0.0", "24.1.0"])("takes Node %s", (version) => {
    expect(nodeProblem(version)).toBeNull();
  });

  it.each(["12.22.1", "18.20.4", "20.18.3"])("refuses Node %s with the remedy", (version) => {
    const sentence = nodeProblem(version);
    expect(sentence).toContain(`this is Node ${version}`);
    expect(sentence).toContain("install Node 20");
  });
});

describe("matchesLock", () => {
  const lock = (packages: Record<string, object>): string => JSON.stringify({ packages });
  const wanted = lock({
    "": { name: "tidemark" },
    "node_modules/a": { version: "1.0.0" },
    "node_modules/b-other-machine": { version: "1.0.0", optional: true },
  });

  it.each([
    ["the same", { "node_modules/a": { version: "1.0.0" } }, true],
    [
      "the same with an optional one",
      {
        "node_modules/a": { version: "1.0.0" },
        "node_modules/b-other-machine": { version: "1.0.0" },
      },
      true,
    ],
    ["another version", { "node_modules/a": { version: "1.0.1" } }, false],
    ["one missing", {}, false],
    [
      "one too many",
      { "node_modules/a": { version: "1.0.0" }, "node_modules/c": { version: "1.0.0" } },
      false,
    ],
  ])("%s", (_, installed, expected) => {
    expect(matchesLock(wanted, lock(installed))).toBe(expected);
  });
});
