/** One holder at a time, told apart from a later process that was given the same number. */
import { linkSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { dirname } from "node:path";
import { z } from "zod";
import { readText } from "../../lib/config/secrets";
import { hasErrorCode } from "../../lib/errors/has-error-code";

const holderSchema = z.object({ pid: z.number().int().positive(), started: z.string() });
type Holder = z.infer<typeof holderSchema>;

/**
 * @param path file that says who holds the lock; its folder is made where missing
 * @returns a function that gives the lock back, or the process id of the holder
 */
export function takeLock(path: string): (() => void) | number {
  mkdirSync(dirname(path), { recursive: true, mode: 0o711 });
  const me: Holder = { pid: process.pid, started: startOf(process.pid) ?? "" };
  for (;;) {
    if (createWhole(path, JSON.stringify(me))) return () => rmSync(path, { force: true });
    const holder = parseHolder(readText(path));
    if (holder !== null && startOf(holder.pid) === holder.started) return holder.pid;
    rmSync(path, { force: true });
  }
}

/** @returns false where the file stands already; a file that appears is complete at once */
function createWhole(path: string, text: string): boolean {
  const draft = `${path}.${process.pid}`;
  writeFileSync(draft, text, { mode: 0o600 });
  try {
    linkSync(draft, path);
    return true;
  } catch (error) {
    if (hasErrorCode(error, "EEXIST")) return false;
    throw error;
  } finally {
    rmSync(draft, { force: true });
  }
}

function parseHolder(text: string | null): Holder | null {
  try {
    return holderSchema.parse(JSON.parse(text ?? ""));
  } catch {
    return null;
  }
}

/** Moment a process began, in the kernel's own ticks; null where there is no such process. */
function startOf(pid: number): string | null {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    return stat.slice(stat.lastIndexOf(")") + 2).split(" ")[19] ?? null;
  } catch {
    return null;
  }
}
