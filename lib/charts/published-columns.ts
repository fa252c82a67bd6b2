/** The columns of a publication's wall: its own figures, under the signed criterion alone. */
import type { Snapshot } from "../publication/snapshot-schema";
import { toColumn, type BandColumns } from "./band-columns";
import { listPlainLevels } from "./series-levels";

export function toPublishedColumns(snapshot: Pick<Snapshot, "bands" | "spl_valid">): BandColumns {
  const levels = listPlainLevels(snapshot.bands.flatMap((band) => band.levels));
  return {
    levels,
    columns: snapshot.bands.map((band) => ({
      // The cause is what a person signed; the column's own reading of it is not wanted.
      ...toColumn({ ...band, cause: "none" }, levels, band.limit, undefined),
      cause: band.cause,
      causeChanged: band.cause_changed,
    })),
    spl: snapshot.spl_valid,
  };
}
