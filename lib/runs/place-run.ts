/** Where an arriving file goes: into its place of the plan, or to wait with the reason said. */
import type { PlannedRun } from "../series/planned-runs";
import { matchFile } from "./match-file";
import type { LadderSlot } from "./ladder";

export interface Placement {
  /** The place it takes now; null where it waits. */
  slot: string | null;
  /** The place it is meant for; it moves there by itself when that opens. */
  wantedSlot: string | null;
  /** Why it waits, in the tester's words; null where it has its place. */
  note: string | null;
}

/**
 * @param file `slot` is what the tester chose; without it the name decides.
 * @param ladder toLadder(...) of the same plan.
 */
export function placeRun(
  file: { fileName: string; slot: string | null },
  planned: readonly PlannedRun[],
  ladder: readonly LadderSlot[],
): Placement {
  const wanted = file.slot ?? slotByName(file.fileName, planned);
  if (typeof wanted !== "string") return { slot: null, wantedSlot: null, note: wanted.reason };
  const run = planned.find((p) => p.slot === wanted);
  if (run === undefined) {
    return {
      slot: null,
      wantedSlot: null,
      note: `The plan has no run ${wanted}. Assign the file by hand.`,
    };
  }
  const place = ladder.find((l) => l.slot === wanted);
  if (place?.waits !== true) return { slot: wanted, wantedSlot: wanted, note: null };
  return {
    slot: null,
    wantedSlot: wanted,
    note: `Waits for its place, ${run.label}: ${place.lockReason ?? "not open yet"}. It moves there by itself.`,
  };
}

function slotByName(fileName: string, planned: readonly PlannedRun[]): string | { reason: string } {
  const match = matchFile(fileName, planned);
  return match.outcome === "matched" ? match.slot : { reason: match.reason };
}
