/** Where chosen files belong, before the first byte is sent. */
import { matchFile } from "@/lib/runs/match-file";
import type { PlannedRun } from "@/lib/series/planned-runs";
import type { RunRow } from "./run-rows";

export interface PlacedFile {
  file: File;
  /** By name; null where the name fits none or several. */
  slot: string | null;
  /** Why no place was found; null where one was. */
  reason: string | null;
}

/** Two files for one place: the later one waits for a person's word. */
export function placeFiles(files: readonly File[], planned: readonly PlannedRun[]): PlacedFile[] {
  const taken = new Set<string>();
  return files.map((file) => {
    const match = matchFile(file.name, planned);
    if (match.outcome === "unmatched") return { file, slot: null, reason: match.reason };
    if (taken.has(match.slot)) {
      return { file, slot: null, reason: `Another of these files is for the same run.` };
    }
    taken.add(match.slot);
    return { file, slot: match.slot, reason: null };
  });
}

/** What a person should know of a place before a file goes there; null where nothing. */
export function toPlaceNote(row: RunRow | undefined): string | null {
  if (row === undefined) return null;
  if (row.run !== null) return `replaces take ${row.run.take}`;
  if (!row.slot.open) return row.slot.lock_reason ?? "not open yet";
  return null;
}

/** Every file has a free place of its own: nothing to ask. */
export function isClear(placed: readonly PlacedFile[], rows: readonly RunRow[]): boolean {
  return placed.every((p) => {
    if (p.slot === null) return false;
    const row = rows.find((r) => r.planned.slot === p.slot);
    return row !== undefined && (row.run === null || row.run.state === "failed");
  });
}
