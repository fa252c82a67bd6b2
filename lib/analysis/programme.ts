/** Estimate of the programme level that a loudspeaker plays within its limits (docs/domain.md section 7). */
import type { Criterion } from "../series/series-schema";
import type { BandLimit } from "./limits";
import type { ThirdOctave } from "./types";
import { aWeightingDb } from "./weighting";

export const PROGRAMME_SPECTRA = ["pink", "iec-60268-1"] as const;
export type ProgrammeSpectrum = (typeof PROGRAMME_SPECTRA)[number];

export const DEFAULT_CREST_DB = 12;
/** Peak of a sine over its rms, dB. */
const SINE_CREST_DB = 10 * Math.log10(2);

/** IEC 60268-1:1985 clause 7, Table II: third-octave levels of the programme signal, dB, by nominal Hz. */
const IEC_60268_1_DB: ReadonlyMap<number, number> = new Map([
  [20, -13.5],
  [25, -10.2],
  [31.5, -7.4],
  [40, -5.2],
  [50, -3.5],
  [63, -2.3],
  [80, -1.4],
  [100, -0.9],
  [125, -0.5],
  [160, -0.2],
  [200, -0.1],
  [250, 0],
  [315, 0],
  [400, 0],
  [500, 0],
  [630, 0],
  [800, 0],
  [1000, -0.1],
  [1250, -0.3],
  [1600, -0.6],
  [2000, -1],
  [2500, -1.6],
  [3150, -2.5],
  [4000, -3.7],
  [5000, -5.1],
  [6300, -7],
  [8000, -9.4],
  [10000, -11.9],
  [12500, -14.8],
  [16000, -18.2],
  [20000, -21.6],
]);

/**
 * Level of a programme spectrum in a third octave, dB re its zero band; NaN outside the table.
 * @see docs/check-values.md section 8
 */
export function programmeBandDb(spectrum: ProgrammeSpectrum, nominalHz: number): number {
  return spectrum === "pink" ? 0 : (IEC_60268_1_DB.get(nominalHz) ?? Number.NaN);
}

/** 10 lg of the sum of powers; minus infinity of none. */
export function sumLevelsDb(levelsDb: readonly number[]): number {
  return 10 * Math.log10(levelsDb.reduce((sum, level) => sum + 10 ** (level / 10), 0));
}

export interface ProgrammeBand {
  band: ThirdOctave;
  limit: BandLimit;
  /** SPL minus drive while linear, dB. */
  splGainDb: number;
}

export interface ProgrammeEstimate {
  spectrum: ProgrammeSpectrum;
  crestDb: number;
  criterion: Criterion;
  /** NaN where there is none: see `refused`. */
  splDb: number;
  splDba: number;
  boundBy: "band" | "peak" | null;
  /** Band that reaches its limit first as the programme gets louder, nominal Hz. */
  firstBandHz: number;
  atLeast: boolean;
  fromHz: number;
  toHz: number;
  refused: string | null;
}

/**
 * The louder of no two bounds: the drive at which the first band meets its limit, and that at which programme peaks
 * equal the peak of a sine at the lowest limit of the headline range.
 *
 * @param bands all bands; those not assessed or without SPL do not count.
 * @param lowestDriveDb lowest limit of the headline range as a drive, dB; null where there is no headline.
 */
export function estimateProgramme(
  spectrum: ProgrammeSpectrum,
  crestDb: number,
  criterion: Criterion,
  bands: readonly ProgrammeBand[],
  lowestDriveDb: number | null,
): ProgrammeEstimate {
  const counted = bands.filter(
    ({ band, limit, splGainDb }) =>
      limit.status !== "not assessed" &&
      Number.isFinite(splGainDb) &&
      Number.isFinite(programmeBandDb(spectrum, band.nominalHz)),
  );
  const estimate = {
    spectrum,
    crestDb,
    criterion,
    fromHz: counted[0]?.band.nominalHz ?? Number.NaN,
    toHz: counted.at(-1)?.band.nominalHz ?? Number.NaN,
  };
  const refuse = (refused: string): ProgrammeEstimate => ({
    ...estimate,
    splDb: Number.NaN,
    splDba: Number.NaN,
    boundBy: null,
    firstBandHz: Number.NaN,
    atLeast: false,
    refused,
  });
  if (lowestDriveDb === null)
    return refuse("without a headline the peaks of a programme have no reference");
  const shapes = counted.map(({ band }) => programmeBandDb(spectrum, band.nominalHz));
  const totalDb = sumLevelsDb(shapes);
  const drives = counted.map(({ limit }, i) => limit.nominalDb - ((shapes[i] ?? 0) - totalDb));
  const bandDriveDb = Math.min(...drives);
  const first = counted[drives.indexOf(bandDriveDb)];
  if (!first) return refuse("no band could be assessed");
  const peakDriveDb = lowestDriveDb + SINE_CREST_DB - crestDb;
  const boundBy = bandDriveDb <= peakDriveDb ? "band" : "peak";
  const driveDb = Math.min(bandDriveDb, peakDriveDb);
  if (boundBy === "band" && first.limit.status === "below lowest") {
    return {
      ...refuse("the band that limits it is past its limit at the lowest run"),
      firstBandHz: first.band.nominalHz,
    };
  }
  const levels = counted.map(
    ({ splGainDb }, i) => driveDb + (shapes[i] ?? 0) - totalDb + splGainDb,
  );
  return {
    ...estimate,
    splDb: sumLevelsDb(levels),
    splDba: sumLevelsDb(
      levels.map((level, i) => level + aWeightingDb(counted[i]?.band.exactHz ?? Number.NaN)),
    ),
    boundBy,
    firstBandHz: first.band.nominalHz,
    atLeast: isAtLeast(counted, boundBy, first, lowestDriveDb),
    refused: null,
  };
}

/** The bound itself was not reached: the first band's, or every limit at the lowest drive of the range. */
function isAtLeast(
  counted: readonly ProgrammeBand[],
  boundBy: "band" | "peak",
  first: ProgrammeBand,
  lowestDriveDb: number,
): boolean {
  if (boundBy === "band") return first.limit.status === "not reached";
  const binding = counted.filter(({ limit }) => Math.abs(limit.nominalDb - lowestDriveDb) < 1e-9);
  return binding.length > 0 && binding.every(({ limit }) => limit.status === "not reached");
}
