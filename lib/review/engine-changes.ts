/** Published limits that the present engine would give otherwise. */
import { formatDb, formatSignedDb } from "../charts/format";
import { chooseLimit, findUsableTopHz } from "../result/choose-limit";
import type { Limit, Result } from "../result/result-schema";
import type { Snapshot } from "../publication/snapshot-schema";

export interface PublishedChange {
  nominal_Hz: number;
  published_dB: number | null;
  now_dB: number | null;
  words: string;
}

/** Where the sound pressure does not hold, the level of the run stands for it. */
const levelOf = (limit: Limit): number | null => limit.spl_dB ?? limit.nominal_dB;

/** @returns bands whose limit would be printed otherwise, to a tenth of a decibel. */
export function listPublishedChanges(
  published: Pick<Snapshot, "bands" | "criterion">,
  now: Pick<Result, "bands" | "grid_Hz" | "runs">,
): PublishedChange[] {
  const usableTopHz = findUsableTopHz(now);
  return published.bands.flatMap(({ nominal_Hz, limit: before }): PublishedChange[] => {
    const band = now.bands.find((one) => one.nominal_Hz === nominal_Hz);
    if (band === undefined) {
      return [
        { nominal_Hz, published_dB: levelOf(before), now_dB: null, words: "no such band any more" },
      ];
    }
    const after = chooseLimit(band, published.criterion, { usableTopHz });
    const words = sayChange(before, after);
    return words === null
      ? []
      : [{ nominal_Hz, published_dB: levelOf(before), now_dB: levelOf(after), words }];
  });
}

function sayChange(before: Limit, after: Limit): string | null {
  const [was, is] = [levelOf(before), levelOf(after)];
  if (before.status !== after.status) return `${sayLimit(before)}, now ${sayLimit(after)}`;
  if (was === null || is === null)
    return was === is ? null : `${sayLimit(before)}, now ${sayLimit(after)}`;
  return was.toFixed(1) === is.toFixed(1)
    ? null
    : `${sayLimit(before)}, now ${sayLimit(after)}: ${formatSignedDb(is - was)}`;
}

function sayLimit(limit: Limit): string {
  const level = levelOf(limit);
  if (level === null || limit.status === "not assessed") return limit.status;
  if (limit.status === "not reached") return `at least ${formatDb(level)}`;
  return limit.status === "below lowest" ? "below the lowest run" : formatDb(level);
}
