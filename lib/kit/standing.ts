/** Where a revision stands now, which its own snapshot cannot know. */
import type { PublicationState } from "../publication/snapshot-schema";
import { toLongDay } from "../time/time-words";

export interface Standing {
  state: PublicationState;
  /** The revision that took its place. */
  replacedBy: { revision: number; at: Date } | null;
  withdrawn: { at: Date; reason: string } | null;
  /** IANA name, of the lab. */
  timeZone: string;
}

/** One sentence for whoever meets an older revision; null for a live one. */
export function toStandingSentence(revision: number, standing: Standing): string | null {
  const { state, replacedBy, withdrawn, timeZone } = standing;
  if (state === "withdrawn") {
    return withdrawn === null
      ? `Revision ${revision} was withdrawn.`
      : `Revision ${revision} was withdrawn on ${toLongDay(withdrawn.at, timeZone)}: ${withdrawn.reason}`;
  }
  if (state !== "replaced") return null;
  return replacedBy === null
    ? `Revision ${revision} was replaced.`
    : `Revision ${revision} was replaced by revision ${replacedBy.revision} on ${toLongDay(replacedBy.at, timeZone)}.`;
}
