/** Which criteria a person may pick from on the screens, given those that an analysis computed. */
import { formatCriterionPercent, formatPlain, NBSP } from "../charts/format";
import type { Criterion } from "../series/series-schema";

export interface CriterionParts {
  /** Distinct THD limits, rising, %. */
  thdPercents: number[];
  /** Distinct compression limits, rising, dB. */
  compressionDbs: number[];
}

export function listCriterionParts(criteria: readonly Criterion[]): CriterionParts {
  return {
    thdPercents: distinct(criteria.map((criterion) => criterion.thd_percent)),
    compressionDbs: distinct(criteria.map((criterion) => criterion.compression_dB)),
  };
}

const distinct = (values: readonly (number | undefined)[]): number[] =>
  [...new Set(values.filter((value) => value !== undefined))].sort((a, b) => a - b);

/** THD 10 % or compression 3 dB where the analysis has them, else the laxest of each. */
export function defaultCriterion({ thdPercents, compressionDbs }: CriterionParts): Criterion {
  const thd = thdPercents.includes(10) ? 10 : thdPercents.at(-1);
  const compression = compressionDbs.includes(3) ? 3 : compressionDbs.at(-1);
  return {
    ...(thd === undefined ? {} : { thd_percent: thd }),
    ...(compression === undefined ? {} : { compression_dB: compression }),
  };
}

/**
 * The criterion of an address such as `?thd=10&compression=off`: what is not offered falls back to
 * the default, and both off is not offered.
 */
export function readCriterion(
  parts: CriterionParts,
  address: { thd: string | null; compression: string | null },
): Criterion {
  const usual = defaultCriterion(parts);
  const thd = readPart(address.thd, parts.thdPercents, usual.thd_percent);
  const compression = readPart(address.compression, parts.compressionDbs, usual.compression_dB);
  if (thd === undefined && compression === undefined) return usual;
  return {
    ...(thd === undefined ? {} : { thd_percent: thd }),
    ...(compression === undefined ? {} : { compression_dB: compression }),
  };
}

function readPart(
  text: string | null,
  offered: readonly number[],
  usual: number | undefined,
): number | undefined {
  if (text === "off") return undefined;
  const value = Number(text);
  return text !== null && offered.includes(value) ? value : usual;
}

/** "THD 10 % or compression 3 dB". */
export function sayCriterion(criterion: Criterion): string {
  const parts: string[] = [];
  if (criterion.thd_percent !== undefined) {
    parts.push(`THD ${formatCriterionPercent(criterion.thd_percent)}`);
  }
  if (criterion.compression_dB !== undefined) {
    parts.push(`compression ${formatPlain(criterion.compression_dB)}${NBSP}dB`);
  }
  return parts.join(" or ");
}

/** Stable word for the address and for comparing: "thd10-comp3", "thd3", "comp1". */
export function toCriterionKey(criterion: Criterion): string {
  const parts: string[] = [];
  if (criterion.thd_percent !== undefined) parts.push(`thd${criterion.thd_percent}`);
  if (criterion.compression_dB !== undefined) parts.push(`comp${criterion.compression_dB}`);
  return parts.join("-");
}
