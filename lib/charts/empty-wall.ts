/** The frame of the wall before any water is: staff, neatline, dashed outlines where columns will stand. */
import { thirdOctaves } from "../analysis/bands";
import type { Figure, Shape } from "./figure";
import { round2 } from "./figure";
import { bandLabelShapes, gridShapes, neatlineShapes, staffShapes } from "./frame-shapes";
import { toBandScale, toDbScale, toWallRange } from "./scales";
import { COLOURS } from "./tokens";

const STAFF_WIDTH = 52;
const TOP = 6;
const FOOT_HEIGHT = 34;

interface EmptyWallInput {
  /** Dashed outlines stand at this level; null: no outline. */
  lowestDb: number | null;
  highestDb: number;
  pitch: number;
  plotHeight: number;
  /** The sweep, which says the bands. */
  startHz: number;
  stopHz: number;
}

export function toEmptyWall(input: EmptyWallInput): Figure {
  const { lowestDb, highestDb, pitch, plotHeight, startHz, stopHz } = input;
  const octaves = thirdOctaves(startHz, stopHz);
  const bands = toBandScale(
    octaves.map((band) => band.exactHz),
    pitch,
  );
  const { minDb, maxDb } = toWallRange([highestDb]);
  const scale = toDbScale(minDb, maxDb, plotHeight);
  const outlines = octaves.map((_band, at): Shape => {
    const y = round2(TOP + scale.toY(lowestDb ?? minDb));
    return {
      kind: "rect",
      role: "outline",
      x: bands.left(at) + 2,
      y,
      width: pitch - 4,
      height: round2(TOP + plotHeight - y),
      stroke: COLOURS.edge,
      dash: [3, 3],
    };
  });
  const plot: Shape[] = [
    ...gridShapes(bands, scale, TOP),
    ...(lowestDb === null ? [] : outlines),
    ...neatlineShapes(bands, TOP + plotHeight),
    ...bandLabelShapes(
      bands,
      octaves.map((band) => band.nominalHz),
      TOP + plotHeight + 24,
      pitch < 20,
    ),
  ];
  return {
    width: STAFF_WIDTH + bands.width + 6,
    height: TOP + plotHeight + FOOT_HEIGHT,
    patterns: [],
    shapes: [
      ...staffShapes(scale, STAFF_WIDTH, TOP),
      { kind: "group", x: STAFF_WIDTH, shapes: plot },
    ],
  };
}
