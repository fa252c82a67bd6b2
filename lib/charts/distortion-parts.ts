/** The components of a run's distortion in percent of the fundamental, and the floor under them. */
import type { Quality, ResultRun } from "../result/result-schema";
import type { Curve } from "./curve-figure";
import { harmonicLine } from "./harmonic-lines";
import { COLOURS, type Paint } from "./tokens";

/** 0 stands for THD, else the order of a harmonic. */
export type Component = number;
export const THD: Component = 0;
export const SHOWN_FIRST: readonly Component[] = [THD, 2, 3, 5];
export const sayComponent = (component: Component): string =>
  component === THD ? "THD" : `H${component}`;

export const toPercent = (levelDb: number): number => 100 * 10 ** (levelDb / 20);

export interface Part {
  readonly component: Component;
  /** Certain values, then uncertain ones. */
  readonly curves: readonly [Curve, Curve];
}

/** @returns [] where the run has no such component. */
export function toPart(
  component: Component,
  { run, level }: { run: ResultRun; level: Paint },
): Part[] {
  const found = toPercentCurve(component, run);
  if (found === null) return [];
  const { percent, quality } = found;
  const only = (wanted: Quality): (number | null)[] =>
    percent.map((value, at) => (quality[at] === wanted ? value : null));
  const look =
    component === THD
      ? { paint: level, width: 3, dash: [] }
      : {
          paint: COLOURS.ink,
          width: harmonicLine(component).width,
          dash: harmonicLine(component).dash,
        };
  return [
    {
      component,
      curves: [
        { key: `${component}`, values: only("measured"), ...look },
        {
          key: `${component}-uncertain`,
          values: only("uncertain"),
          paint: COLOURS.ink3,
          width: 1,
          dash: [1, 3],
        },
      ],
    },
  ];
}

/** Percent of the fundamental on the grid, with its quality; null where the order is not there at all. */
export function toPercentCurve(
  component: Component,
  run: ResultRun,
): { percent: (number | null)[]; quality: readonly (Quality | null)[] } | null {
  if (component === THD) return { percent: run.thd_percent, quality: run.thd_quality };
  const harmonic = run.harmonics.find((h) => h.order === component);
  if (harmonic === undefined) return null;
  return {
    percent: harmonic.spl_dB.map((spl, at) => relativePercent(spl, run.spl_dB[at])),
    quality: harmonic.quality,
  };
}

function relativePercent(
  levelDb: number | null | undefined,
  fundamentalDb: number | null | undefined,
): number | null {
  if (
    levelDb === null ||
    levelDb === undefined ||
    fundamentalDb === null ||
    fundamentalDb === undefined
  )
    return null;
  return toPercent(levelDb - fundamentalDb);
}

/** A component counts from 6 dB over its floor. */
const RESOLVED_DB = 6;

/** The lowest bound of the shown orders: nothing drawn lies under it. */
export function toFloorPercent(run: ResultRun, shown: readonly Component[]): (number | null)[] {
  const orders = shown.filter((component) => component !== THD);
  const drawn = run.harmonics.filter((h) =>
    orders.length === 0 ? h.order === 2 : orders.includes(h.order),
  );
  return run.spl_dB.map((fundamental, at) => {
    const floors = drawn.flatMap((h) => {
      const floor = h.floor_dB[at];
      const percent = relativePercent(
        floor === null || floor === undefined ? null : floor + RESOLVED_DB,
        fundamental,
      );
      return percent === null ? [] : [percent];
    });
    return floors.length === 0 ? null : Math.min(...floors);
  });
}
