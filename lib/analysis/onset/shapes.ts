/**
 * The laws an onset is sought among. A shape is a loss curve that passes through 1/3 dB at drive 0;
 * a law of a device is a shape moved along the drive axis to its onset.
 */
import {
  OVERLOAD_LAWS,
  gainRidingExcessDb,
  gainRidingLossDb,
  overloadLossDb,
  turbulentPortLossDb,
  twoPathExcessDb,
  twoPathLossDb,
  type OverloadLaw,
} from "./static-laws";

/** The loss that defines the onset, dB: a convention (docs/onset-notes.md). */
export const ONSET_LOSS_DB = 1 / 3;

export type Family = "gain riding" | "two paths" | "overload";

export interface Shape {
  family: Family;
  /** As the result names it: "hard limiter", "soft knee", "two paths", "turbulent port", "hard clip", "tanh", ... */
  law: string;
  /** Knee width, dB, and slope above the knee; NaN where the family has none. */
  kneeDb: number;
  slope: number;
  /** Loss, dB, at a drive `offsetDb` above the onset. */
  lossDb: (offsetDb: number) => number;
  /** Drive above the onset, dB, where the loss is `lossDb`; Infinity where it never is. */
  offsetDb: (lossDb: number) => number;
  /** Prior weight within its family; a family's weights sum to 1. */
  prior: number;
}

const KNEES_DB = [0, 1, 2, 3, 4, 6, 8, 10, 12, 14, 16, 20, 24];
const SLOPES = [
  0, 0.02, 0.04, 0.07, 0.1, 0.14, 0.18, 0.22, 0.26, 0.3, 0.34, 0.38, 0.42, 0.46, 0.5, 0.54, 0.58,
  0.62, 0.66, 0.7, 0.74, 0.78, 0.8,
];
const SHARES = [
  0.1, 0.15, 0.2, 0.25, 0.3, 0.35, 0.4, 0.45, 0.5, 0.55, 0.6, 0.65, 0.7, 0.75, 0.8, 0.85, 0.9, 0.95,
];
/** Name of the law of a port. */
export const TURBULENT_PORT = "turbulent port";
/** Around the tuning the port has most of the sound. */
const PORT_SHARES = [0.4, 0.6, 0.8, 1];
/** Where in the table its 1/3 dB lies near drive 0. */
const PORT_SHIFT_DB = -26;
const HARD_KNEE_PRIOR = 0.35;
const KNEE_DECAY_DB = 8;
const SLOPE_SOFTENING = 0.05;
/** Where one way of two clips, the crossover region shows a clipper beside a clean path. */
const CLIPPED_SHARES = [0.4, 0.55, 0.7, 0.85];
const CLIPPED_SHARE_PRIOR = 0.01;

/** All shapes, in a fixed order: gain riding, two paths, overload. */
export function buildShapes(): Shape[] {
  return [
    ...normalised(gainRiding()),
    ...normalised([...twoPaths(), ...ports()]),
    ...normalised(overload()),
  ];
}

function normalised(shapes: Shape[]): Shape[] {
  const total = shapes.reduce((sum, shape) => sum + shape.prior, 0);
  return shapes.map((shape) => ({ ...shape, prior: shape.prior / total }));
}

/** Width of the cell round each value: the trapezoidal weight of an uneven grid. */
function cells(values: readonly number[]): number[] {
  return values.map((value, i) => ((values[i + 1] ?? value) - (values[i - 1] ?? value)) / 2);
}

function gainRiding(): Shape[] {
  const softWeights = cells(KNEES_DB.slice(1)).map(
    (cell, i) => cell * Math.exp(-(KNEES_DB[i + 1] ?? 0) / KNEE_DECAY_DB),
  );
  const softTotal = softWeights.reduce((a, b) => a + b, 0);
  const slopeCells = cells(SLOPES);
  return KNEES_DB.flatMap((kneeDb, w) =>
    SLOPES.map((slope, s): Shape => {
      const onset = gainRidingExcessDb(ONSET_LOSS_DB, kneeDb, slope);
      const kneePrior =
        w === 0 ? HARD_KNEE_PRIOR : ((1 - HARD_KNEE_PRIOR) * (softWeights[w - 1] ?? 0)) / softTotal;
      return {
        family: "gain riding",
        law: kneeDb === 0 ? "hard limiter" : "soft knee",
        kneeDb,
        slope,
        lossDb: (offset) => gainRidingLossDb(offset + onset, kneeDb, slope),
        offsetDb: (loss) => gainRidingExcessDb(loss, kneeDb, slope) - onset,
        prior: (kneePrior * (slopeCells[s] ?? 0)) / (SLOPE_SOFTENING + slope),
      };
    }),
  );
}

function twoPaths(): Shape[] {
  return SHARES.map((share): Shape => {
    const onset = twoPathExcessDb(ONSET_LOSS_DB, share);
    return {
      family: "two paths",
      law: "two paths",
      kneeDb: Number.NaN,
      slope: Number.NaN,
      lossDb: (offset) => twoPathLossDb(offset + onset, share),
      offsetDb: (loss) => twoPathExcessDb(loss, share) - onset,
      prior: 1,
    };
  });
}

/** A port beside its cone is two paths as well, one of which gives way from the very start. */
function ports(): Shape[] {
  return PORT_SHARES.map((share) => ({
    family: "two paths",
    law: TURBULENT_PORT,
    kneeDb: Number.NaN,
    slope: Number.NaN,
    ...interpolate(tableOf((drive) => turbulentPortLossDb(drive + PORT_SHIFT_DB, share))),
    prior: 1,
  }));
}

const OVERLOAD_PRIOR: Record<OverloadLaw, number> = {
  "hard clip": 0.35,
  tanh: 0.2,
  cubic: 0.2,
  arctangent: 0.08,
  algebraic: 0.08,
  sine: 0.09,
};

function overload(): Shape[] {
  const losses = Object.fromEntries(
    OVERLOAD_LAWS.map((law) => [
      law,
      tableOf((excess) => overloadLossDb(law, excess, QUADRATURE_POINTS)),
    ]),
  );
  const shapeOf = (law: OverloadLaw, table: Float64Array, prior: number): Shape => ({
    family: "overload",
    law,
    kneeDb: Number.NaN,
    slope: Number.NaN,
    ...interpolate(table),
    prior,
  });
  const plain = OVERLOAD_LAWS.map((law) =>
    shapeOf(law, losses[law] ?? new Float64Array(), OVERLOAD_PRIOR[law]),
  );
  const beside = (["hard clip", "tanh"] as const).flatMap((law) =>
    CLIPPED_SHARES.map((share) => {
      const loss = (losses[law] ?? new Float64Array()).map(
        (db) => -20 * Math.log10(1 - share + share * 10 ** (-db / 20)),
      );
      return shapeOf(law, loss, CLIPPED_SHARE_PRIOR);
    }),
  );
  return [...plain, ...beside];
}

const QUADRATURE_POINTS = 32;
const TABLE_FROM_DB = -32;
const TABLE_TO_DB = 40;
const TABLE_STEP_DB = 0.25;
const TABLE_LENGTH = Math.round((TABLE_TO_DB - TABLE_FROM_DB) / TABLE_STEP_DB) + 1;

const tableOf = (lossOfExcess: (excessDb: number) => number): Float64Array =>
  Float64Array.from({ length: TABLE_LENGTH }, (_, i) =>
    lossOfExcess(TABLE_FROM_DB + i * TABLE_STEP_DB),
  );

/** A loss curve in linear pieces, moved so that its 1/3 dB point stands at drive 0. */
function interpolate(losses: Float64Array): Pick<Shape, "lossDb" | "offsetDb"> {
  const excessAt = (loss: number): number => {
    const above = losses.findIndex((value) => value >= loss);
    if (above < 0) return Infinity;
    if (above === 0) return TABLE_FROM_DB;
    const low = losses[above - 1] ?? 0;
    const high = losses[above] ?? 0;
    return TABLE_FROM_DB + (above - 1 + (loss - low) / (high - low)) * TABLE_STEP_DB;
  };
  const onset = excessAt(ONSET_LOSS_DB);
  return {
    lossDb: (offset) => {
      const at = Math.min(
        Math.max((offset + onset - TABLE_FROM_DB) / TABLE_STEP_DB, 0),
        TABLE_LENGTH - 1,
      );
      const i = Math.min(Math.floor(at), TABLE_LENGTH - 2);
      const low = losses[i] ?? 0;
      return low + (at - i) * ((losses[i + 1] ?? 0) - low);
    },
    offsetDb: (loss) => excessAt(loss) - onset,
  };
}
