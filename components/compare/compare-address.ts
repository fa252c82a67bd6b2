/** The comparison as it stands in the address: it can be sent to somebody and comes back. */
import {
  createLoader,
  createSerializer,
  parseAsArrayOf,
  parseAsString,
  parseAsStringLiteral,
  type inferParserType,
} from "nuqs/server";
import type { z } from "zod";
import type { compareQuerySchema } from "@/lib/api/compare";
import { COMPARED_KINDS, MOST_COMPARED } from "@/lib/compare/comparison-schema";

export const compareAddress = {
  /** The first is the reference. */
  series: parseAsArrayOf(parseAsString).withDefault([]),
  thd: parseAsString,
  compression: parseAsString,
  runs: parseAsStringLiteral(COMPARED_KINDS).withDefault("short-term"),
};
export type CompareView = inferParserType<typeof compareAddress>;

export const loadCompareView = createLoader(compareAddress);
const serialize = createSerializer(compareAddress);

export const toCompareHref = (series: readonly string[]): string =>
  serialize("/compare", { series: [...series] });

const ID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** The ids in it that could be some, each once, four at most. */
export const toChosenIds = (series: readonly string[]): string[] =>
  [...new Set(series.filter((id) => ID.test(id)))].slice(0, MOST_COMPARED);

export type CompareQuery = z.input<typeof compareQuerySchema>;

/** What is asked of the API; null while nothing is chosen. Whatever somebody wrote, it is a valid question. */
export function toCompareQuery(view: CompareView): CompareQuery | null {
  const ids = toChosenIds(view.series);
  if (ids.length === 0) return null;
  return {
    series: ids.join(","),
    ...(view.thd === null ? {} : { thd: view.thd.slice(0, 12) }),
    ...(view.compression === null ? {} : { compression: view.compression.slice(0, 12) }),
    runs: view.runs,
  };
}

/** The one becomes the reference; the others keep their order. */
export const toReferenceFirst = (series: readonly string[], id: string): string[] => [
  id,
  ...series.filter((one) => one !== id),
];

/** In where it was not, while there is room; out where it was. */
export const toggleChosen = (chosen: readonly string[], id: string): string[] =>
  chosen.includes(id)
    ? chosen.filter((one) => one !== id)
    : [...chosen, id].slice(0, MOST_COMPARED);
