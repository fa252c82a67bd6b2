import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, expect, it } from "vitest";
import { describeSignIns, signInsPath } from "./demo-sign-ins";

const dataDir = mkdtempSync(join(tmpdir(), "tidemark-demo-"));
afterAll(() => rmSync(dataDir, { recursive: true, force: true }));

it("prints nothing without a demo, and one line for each sign-in with one", () => {
  expect(describeSignIns(dataDir)).toEqual([]);
  const row = { lab: "Fen Lab", name: "A", password: "pass word", roles: ["tester", "analyst"] };
  const rows = [
    { ...row, email: "a@fen.example" },
    { ...row, email: "longer@fen.example", roles: ["admin"] },
  ];
  writeFileSync(signInsPath(dataDir), JSON.stringify(rows));
  expect(describeSignIns(dataDir)).toEqual([
    "Demo sign-ins:",
    "  a@fen.example       pass word  tester, analyst of Fen Lab",
    "  longer@fen.example  pass word  admin of Fen Lab",
  ]);
});
