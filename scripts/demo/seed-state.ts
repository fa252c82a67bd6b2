/**
 * What the seed leaves beside the data: the sign-ins, and while it is under way a note that says so.
 * Both are written before the first row, so that a seed that was interrupted is told from a database
 * that somebody else filled.
 */
import { randomBytes } from "node:crypto";
import { existsSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { readSignIns, type SignIn, signInsPath } from "../setup/demo-sign-ins";
import type { DemoLab } from "./demo-labs";

const notePath = (dataDir: string): string => join(dataDir, "demo-under-way");

export const isUnderWay = (dataDir: string): boolean => existsSync(notePath(dataDir));

/** @returns the password of every demo member: that of a seed before, else a new one. */
export function beginSeed(dataDir: string, labs: readonly DemoLab[]): string {
  const before = isUnderWay(dataDir) ? readSignIns(dataDir)[0] : undefined;
  const password = before?.password ?? createPassword();
  const rows: SignIn[] = labs.flatMap((lab) =>
    lab.members.map(({ name, email, roles }) => ({ lab: lab.name, name, email, password, roles })),
  );
  writeWhole(signInsPath(dataDir), `${JSON.stringify(rows, null, 2)}\n`);
  writeWhole(
    notePath(dataDir),
    "The demo labs are being filled; a start goes on where it ended.\n",
  );
  return password;
}

export const endSeed = (dataDir: string): void => rmSync(notePath(dataDir), { force: true });

/** Of this installation alone; to be read from a terminal and typed. */
function createPassword(): string {
  const word = (): string => randomBytes(2).toString("hex");
  return `tide-${word()}-${word()}-${word()}`;
}

function writeWhole(path: string, text: string): void {
  const draft = `${path}.draft`;
  writeFileSync(draft, text, { mode: 0o600 });
  renameSync(draft, path);
}
