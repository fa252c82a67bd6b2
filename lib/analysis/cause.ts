/** Which cause stands behind the short-term loss of each band (docs/domain.md section 6). */
import type { ShortTermCause } from "../series/vocabulary";
import type { LevelGroup } from "./compression";
import { findEqualiser } from "./equaliser";
import type { BandOnset } from "./onset/find-onsets";
import { TURBULENT_PORT } from "./onset/shapes";
import { findPorts, type PortFinding } from "./port";
import { sayDb, sayHz, sayNumber } from "./say";
import { CEILING_SLOPE, readSlope, stepSlopes } from "./slope";
import type { MeasuredSeries } from "./types";

/** The least odd distortion, over the loss, of any memoryless law: less than this beside a port's loss is the port's. */
const MEMORYLESS_ODD_RATIO = 0.33;
/** An overload without loss counts from this distortion, %. */
const NOTABLE_THD_PERCENT = 3;
/** A crossover region reaches this many bands beyond the limited way. */
const CROSSOVER_BANDS = 4;

export interface BandCause {
  cause: ShortTermCause;
  inferred: boolean;
  reason: string;
  /** Slope over the top step; NaN where there is none. */
  slope: number;
  /** More drive gives (almost) no more output. */
  ceiling: boolean;
}

interface Context {
  series: MeasuredSeries;
  groups: readonly LevelGroup[];
  onsets: readonly BandOnset[];
  ports: PortFinding[];
}

/**
 * Names one cause per band, from the band's own runs first, from its neighbours where those cannot tell.
 *
 * @param groups plain short-term levels, ascending.
 * @returns [bands]
 */
export function nameCauses(
  series: MeasuredSeries,
  groups: readonly LevelGroup[],
  onsets: readonly BandOnset[],
): BandCause[] {
  const context: Context = { series, groups, onsets, ports: findPorts(series, groups, onsets) };
  const own = onsets.map((onset, b) => nameCause(context, onset, b));
  return own.map((cause, b) => ofLimitedWay(context, own, cause, b));
}

function nameCause(context: Context, onset: BandOnset, b: number): BandCause {
  const { groups, series, onsets } = context;
  const top = stepSlopes(groups, onset).at(-1);
  const finding = (cause: ShortTermCause, words: string, ceiling = false): BandCause => ({
    cause,
    inferred:
      (cause === "limiter" || cause === "compressor" || cause === "overload") &&
      onset.overloadInferred,
    reason: `${words.charAt(0).toUpperCase()}${words.slice(1)}${words.endsWith(".") ? "" : "."}`,
    slope: top?.slope ?? Number.NaN,
    ceiling,
  });
  const losses = onset.detection?.lossDb;
  const lossDb = losses?.[onset.detection?.top ?? 0] ?? Number.NaN;
  if (onset.status === "unresolved") return finding("unresolved", onset.reason);
  if (onset.status === "not reached") {
    return isOverloadWithoutLoss(context, onset, lossDb, b)
      ? finding("overload", `${distortionWords(onset)}, though only ${sayDb(lossDb, 2)} is lost`)
      : finding("none", onset.reason);
  }
  const reading = readSlope(groups, onset);
  const port = context.ports[b] ?? { found: false, suspected: false, reason: "" };
  if (onset.overload === "overload" && !(port.found && isWeakDistortion(onset))) {
    return finding(
      "overload",
      `${sayDb(lossDb)} is lost and ${distortionWords(onset)}`,
      (top?.slope ?? 1) <= CEILING_SLOPE,
    );
  }
  const equaliser = findEqualiser(groups, series.bands, onsets, b);
  // Under its onset a port, too, gives way from the lowest step on: by its own law, round its tuning.
  const isPortLaw = port.found && onset.posterior?.law === TURBULENT_PORT;
  if (equaliser !== null && !isPortLaw) return finding("equaliser", equaliser);
  if (port.found && reading.kind !== "ceiling") return finding("port", port.reason);
  if (onset.overload === "no verdict") {
    const why = onset.distortion?.reason ?? "the distortion is not known";
    return finding(
      "unresolved",
      `${sayDb(lossDb)} is lost, but ${why} and no neighbour tells: a limiter and an overload look alike`,
    );
  }
  if (reading.kind === "unclear") return finding("unresolved", reading.words);
  const words = `${reading.words}; ${distortionWords(onset)}`;
  if (reading.kind === "ceiling") return finding("limiter", words, true);
  const hint = port.suspected
    ? "; the loss is local to the bass: port suspected, its tuning or a run with the port blocked would tell"
    : "";
  return finding("compressor", `${words}${hint}`);
}

const isWeakDistortion = ({ distortion }: BandOnset): boolean =>
  (distortion?.oddRatio ?? 0) < MEMORYLESS_ODD_RATIO;

function isOverloadWithoutLoss(
  { groups }: Context,
  onset: BandOnset,
  lossDb: number,
  b: number,
): boolean {
  if (onset.overload !== "overload" || onset.overloadInferred || !onset.detection) return false;
  if (lossDb >= 0.12) return true;
  const band = groups[onset.detection.top]?.runs[0]?.bands[b];
  return band?.thdQuality === "measured" && band.thdPercent >= NOTABLE_THD_PERCENT;
}

function distortionWords({ distortion, overload, overloadInferred }: BandOnset): string {
  if (overloadInferred || !distortion) {
    const verdict = overload === "overload" ? "show an overload" : "show no overload";
    return `${distortion?.reason ?? "the distortion is not known"}, so the verdict is that of the neighbours, which ${verdict}`;
  }
  const ratio = `the odd harmonics are ${sayNumber(distortion.oddRatio, 2)} of the amplitude lost`;
  const growth = `H3 grew ${sayDb(distortion.growthDb)} beyond what follows the output`;
  if (overload === "overload") {
    return Number.isFinite(distortion.oddRatio)
      ? `${ratio}, enough for an overload, and ${growth}`
      : growth;
  }
  if (distortion.oddRatio < 0.2) return `${ratio}, too little for an overload`;
  return `${ratio}, but ${growth}, no more than ${sayDb(distortion.growthNeededDb)}: it follows the output`;
}

/**
 * A band between a limited way and a free one gives way gradually because the free path adds to it: the slope
 * climbs from band to band. It belongs to the limiter next to it.
 */
function ofLimitedWay(
  { onsets, series }: Context,
  own: readonly BandCause[],
  cause: BandCause,
  b: number,
): BandCause {
  if (cause.cause !== "compressor" && cause.cause !== "unresolved") return cause;
  if (onsets[b]?.status !== "found") return cause;
  const lossAt = (i: number): number => {
    const detection = onsets[i]?.detection;
    return detection?.lossDb[detection.top] ?? Number.NaN;
  };
  for (const side of [-1, 1]) {
    if (!(lossAt(b - side) < lossAt(b))) continue;
    for (let away = 1; away <= CROSSOVER_BANDS; away++) {
      const i = b + side * away;
      const near = own[i];
      if (
        !near ||
        !(lossAt(i) > lossAt(i - side)) ||
        !(near.slope < (own[i - side]?.slope ?? -Infinity))
      )
        break;
      // A chord over the one run that loses is no slope: only a ceiling seen there can be lent.
      if (near.cause !== "limiter" || !(near.slope <= CEILING_SLOPE)) continue;
      const hz = sayHz(series.bands[i]?.nominalHz ?? Number.NaN);
      return {
        ...cause,
        cause: "limiter",
        inferred: true,
        reason: `The slope climbs from ${sayNumber(near.slope, 2)} at ${hz} to ${sayNumber(cause.slope, 2)} here, as where a limited way and a free one add up: taken from the limiter at ${hz}.`,
      };
    }
  }
  return cause;
}
