/** The arrival checks of a run that comes as a table: what can be told of it without samples. */
import { assembleRun, toLowResponse } from "../../analysis/assemble-run";
import { thirdOctaves, twentyFourthOctaves } from "../../analysis/bands";
import { meanInBand } from "../../analysis/mean-in-band";
import type { RawRun } from "../../analysis/measure-run";
import { sayBands, sayHz } from "../../analysis/say";
import { toPlaceDb } from "../../analysis/scale";
import { sayCoarse, toTableRun } from "../../analysis/table-run";
import { readTable, type FrequencyTable } from "../../audio/read-table";
import { AnalysisError, FileError } from "../../errors/app-error";
import type { ArrivalCheck, ArrivalReport } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { passed, speaking } from "./check";
import { checkDuplicate } from "./file-checks";
import { round } from "./file-facts";
import {
  checkClosing,
  checkLevelPlan,
  checkLevelStep,
  checkLowestDistortion,
  checkStopRule,
  type LevelFacts,
} from "./level-checks";
import { toThdPercent } from "./measure-sweep";
import { findFullScaleDb } from "./siblings";

const MAP_AGAIN =
  "Look into the file, then send it again and say in the preview which column holds what.";

/** @returns checks and figures; a table that cannot be read gives a report that says so. */
export function checkTable(request: ArrivalRequest): ArrivalReport {
  const { run } = request;
  try {
    const source = request.open(run.digest);
    const table = readTable(source.read(0, source.size), run.file, run.columns);
    const { checks, figures } = checkContent(request, table);
    return {
      ...toFrame(request),
      ...figures,
      checks: [sayReadable(table), checkDuplicate(request), ...checks],
    };
  } catch (error) {
    if (!(error instanceof FileError || error instanceof AnalysisError)) throw error;
    return {
      ...toFrame(request),
      checks: [
        speaking("readable", "fail", {
          title: "not readable",
          finding: error.message,
          spoils: "Nothing can be measured in it.",
          remedy: MAP_AGAIN,
        }),
      ],
    };
  }
}

interface TableFindings {
  checks: ArrivalCheck[];
  figures: Partial<ArrivalReport>;
}

function checkContent(request: ArrivalRequest, table: FrequencyTable): TableFindings {
  const { place } = request.run;
  if (place === null) return { checks: [], figures: {} };
  if (place.levelDb === null) {
    return {
      checks: [
        speaking("sweep-present", "fail", {
          title: "a table is no recording",
          finding: `${place.label} needs a recording; this is a table of frequency and level.`,
          spoils: "Neither gain nor noise can be read from it.",
          remedy:
            "Send the recording. Where all runs are tables, excuse this place: tables state their levels themselves.",
        }),
      ],
      figures: {},
    };
  }
  const { environment, distance_m: distanceM } = request.plan.place;
  const fullScaleDb = findFullScaleDb(request.plan, request.siblings);
  const toOneMetreDb = (fullScaleDb ?? 0) + toPlaceDb(environment, distanceM);
  const facts = toLevelFacts(request, table, toOneMetreDb);
  const levelDb = facts.summary.level_dBFS + toOneMetreDb;
  const known = Number.isFinite(levelDb);
  const checks = [
    checkCoverage(table, facts),
    known ? checkLevelPlan(request, levelDb) : null,
    checkLevelStep(request, facts),
    known ? checkClosing(request, facts) : null,
    // Without a figure there is nothing to hold against the limit.
    Number.isNaN(facts.thdPercent) ? null : checkLowestDistortion(request, facts),
    checkStopRule(request, facts),
  ].filter((check) => check !== null);
  return {
    checks,
    figures: {
      measured_level_dB: known ? round(levelDb, 2) : null,
      full_scale_dB: fullScaleDb === null ? null : round(fullScaleDb, 3),
      ...(known ? { sweep: facts.summary } : {}),
    },
  };
}

/** @param toOneMetreDb what a level re full scale becomes SPL at 1 m by: so that recordings beside it compare. */
function toLevelFacts(
  { plan, run }: ArrivalRequest,
  table: FrequencyTable,
  toOneMetreDb: number,
): LevelFacts {
  const { start_Hz: startHz, stop_Hz: stopHz, rate_Hz: rateHz } = plan.sweep;
  const grid = twentyFourthOctaves(startHz, stopHz);
  const bands = thirdOctaves(startHz, stopHz);
  const raw = toTableRun(table, run.file, grid.edgeHz, toOneMetreDb);
  const everywhere = Array.from(grid.centreHz, () => true);
  const topHz = Math.min(stopHz, 0.45 * rateHz);
  const measured = assembleRun(
    raw,
    { file: run.file, level_dB: 0, kind: "short-term", channel: 1 },
    0,
    {
      grid,
      bands,
      fundamentalValid: everywhere,
      splValid: everywhere,
      topHz,
      fullScaleDb: 0,
      referenceBandHz: plan.reference_band_Hz,
      gateNoiseShare: 0,
      lowResponse: toLowResponse(raw),
    },
  );
  const orNull = (value: number): number | null =>
    Number.isFinite(value) ? round(value, 4) : null;
  return {
    bands,
    held: measured.bands.map(({ levelDb }) => Number.isFinite(levelDb)),
    run: measured,
    thdPercent: toReferenceThd(raw, grid.edgeHz, plan.reference_band_Hz, topHz),
    summary: {
      band_dBFS: measured.bands.map(({ levelDb }) => orNull(levelDb)),
      sigma_dB: measured.bands.map(({ sigmaDb }) => orNull(sigmaDb)),
      level_dBFS: round(measured.measuredLevelDb, 3),
      phase_rad: [],
      hiss_dBFS: null,
      arrivals: [],
    },
  };
}

/** What the table states of the reference band, else the sum of its harmonics; NaN where it holds neither. */
function toReferenceThd(
  raw: RawRun,
  edgeHz: Float64Array,
  band: readonly [number, number],
  topHz: number,
): number {
  const stated = raw.stated?.thd ?? null;
  const power = raw.orders[0]?.power;
  if (stated === null || power === undefined) {
    const orders = raw.orders.filter(({ power: cells }) => cells.some((p) => Number.isFinite(p)));
    return orders.length > 1 ? toThdPercent({ orders }, edgeHz, band, topHz) : Number.NaN;
  }
  const distorted = stated.map((ratio, c) => ratio * (power[c] ?? Number.NaN));
  return 100 * Math.sqrt(meanInBand(distorted, edgeHz, band) / meanInBand(power, edgeHz, band));
}

function sayReadable(table: FrequencyTable): ArrivalCheck {
  const { frequencyHz, thdPercent, harmonics, columns } = table;
  const named = [
    `frequency in column ${columns.frequency + 1}`,
    `level in column ${columns.level + 1}`,
    ...(columns.thd === undefined ? [] : [`THD in column ${columns.thd + 1}`]),
    ...columns.harmonics.map(
      ({ order, column, unit }) => `H${order} (${unit}) in column ${column + 1}`,
    ),
  ];
  const none =
    thdPercent === undefined && harmonics.length === 0
      ? " It holds no distortion: limits by THD and causes that need harmonics will not be assessed."
      : "";
  return passed("readable", {
    title: "a table",
    finding: `A table of ${frequencyHz.length} rows from ${sayHz(frequencyHz[0] ?? 0)} to ${sayHz(frequencyHz.at(-1) ?? 0)}: ${named.join(", ")}. Levels are taken as dB SPL at 1 m; noise, clipping and latency are not known.${none}`,
  });
}

function checkCoverage(table: FrequencyTable, { bands, held }: LevelFacts): ArrivalCheck {
  const missing = bands.filter((_, b) => held[b] !== true).map(({ nominalHz }) => nominalHz);
  const coarse = sayCoarse(table.frequencyHz);
  if (missing.length === 0 && coarse === null) {
    return passed("sweep-complete", {
      title: "all bands in",
      finding: "The table covers every band of the plan.",
    });
  }
  return speaking("sweep-complete", "warn", {
    title: missing.length > 0 ? "bands missing" : "coarse table",
    finding: [
      ...(missing.length > 0
        ? [
            `The table does not cover ${missing.length === 1 ? "the band" : "the bands"} ${sayBands(missing, 4)}.`,
          ]
        : []),
      ...(coarse === null ? [] : [coarse]),
    ].join(" "),
    spoils:
      missing.length > 0
        ? "Bands without a level are left out of the result."
        : "A narrow dip or peak between two rows does not show.",
    remedy: "Export the table with more rows, over the whole range of the sweep, if you can.",
    bands_Hz: missing,
  });
}

const toFrame = ({ run, engineVersion }: ArrivalRequest): Omit<ArrivalReport, "checks"> => ({
  engine_version: engineVersion,
  format: "table",
  rate_Hz: 0,
  channels: 0,
  channel: run.channel,
  bits: 0,
  length_s: 0,
  peak_dBFS: null,
  rms_dBFS: null,
  measured_level_dB: null,
  snr_dB: null,
  latency_s: null,
  drift_ppm: null,
  envelope: { from_s: 0, to_s: 0, low: [], high: [], from_Hz: null, to_Hz: null },
});
