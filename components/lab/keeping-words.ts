/** What is kept and why, in words. */
import type { ArchivedSeries } from "@/lib/api/keeping";
import { formatBytes } from "@/lib/charts/format";

const count = (number: number, one: string): string => `${number} ${one}${number === 1 ? "" : "s"}`;

export const toRetentionWords = (days: number | null): string =>
  days === null
    ? "Recordings are kept for good, unless an admin removes them here."
    : `Recordings are removed ${count(days, "day")} after their series went to the archive.`;

/** "8 recordings, 30.1 MB; 3 cited by a publication". */
export function toHoldings(series: ArchivedSeries): string {
  const { removable, removable_bytes, cited, shared } = series;
  return [
    ...(removable === 0
      ? []
      : [`${count(removable, "recording")}, ${formatBytes(removable_bytes)}`]),
    ...(cited === 0 ? [] : [`${cited} cited by a publication`]),
    ...(shared === 0 ? [] : [`${shared} shown elsewhere`]),
  ].join("; ");
}
