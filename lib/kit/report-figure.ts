/** The figure of the report: the wall with onset and causes, and the compression map on its pitch. */
import { toCompressionMap, toMapRows, type MapRow } from "../charts/compression-map";
import type { Figure, Shape } from "../charts/figure";
import { toPublishedColumns } from "../charts/published-columns";
import { reachedShapes } from "../charts/reader-wall";
import { toWall } from "../charts/wall";
import type { Snapshot } from "../publication/snapshot-schema";
import { drawHatches } from "./hatch";
import { outlineFigure } from "./outlines";

const STAFF = 74;
const HEAD = 44;

/** @param size of the whole figure and of its plot, CSS px. Text as outlines, no patterns: fit for print. */
export function toReportFigure(
  snapshot: Snapshot,
  { width, plotHeight }: { width: number; plotHeight: number },
): Figure {
  const columns = toPublishedColumns(snapshot);
  const count = Math.max(1, columns.columns.length);
  const wall = toWall(columns, {
    pitch: Math.floor(((width - STAFF - 2) / count) * 100) / 100,
    plotHeight,
    head: HEAD,
    staffWidth: STAFF,
    decisions: false,
    causes: true,
    sparseLabels: false,
  });
  const rows = toPublishedMapRows(snapshot);
  const map = toCompressionMap(rows, wall.bands, STAFF);
  const at = (x: number, y: number, shapes: readonly Shape[]): Shape => ({
    kind: "group",
    x,
    y,
    shapes,
  });
  const mapTop = wall.plot.height;
  return outlineFigure(
    drawHatches({
      width,
      height: mapTop + (rows.length === 0 ? 0 : map.plot.height),
      patterns: [...wall.plot.patterns, ...map.plot.patterns],
      shapes: [
        at(0, 0, wall.staff.shapes),
        at(STAFF, 0, [...wall.plot.shapes, ...reachedShapes(snapshot, wall, false)]),
        ...(rows.length === 0
          ? []
          : [at(0, mapTop, map.staff.shapes), at(STAFF, mapTop, map.plot.shapes)]),
      ],
    }),
  );
}

/** Rows of the compression map: every run above the reference, then those after conditioning. */
export const toPublishedMapRows = ({ bands }: Pick<Snapshot, "bands">): MapRow[] =>
  toMapRows({ bands, runs: bands.flatMap((band) => band.levels) });
