/** The state of the list as it stands in the address: a view can be sent to somebody and comes back. */
import {
  createLoader,
  parseAsArrayOf,
  parseAsInteger,
  parseAsString,
  parseAsStringLiteral,
  type inferParserType,
} from "nuqs/server";
import { SERIES_SORTS } from "@/lib/api/series";
import { SERIES_STATES } from "@/lib/series/vocabulary";
import { toCriterionKey } from "@/lib/result/criteria";
import type { SeriesListQuery } from "../queries/query-keys";
import { DEFAULT_CRITERION } from "./list-words";

export const listAddress = {
  search: parseAsString.withDefault(""),
  state: parseAsStringLiteral(SERIES_STATES),
  loudspeaker: parseAsString,
  archived: parseAsStringLiteral(["no", "yes"]).withDefault("no"),
  sort: parseAsStringLiteral(SERIES_SORTS).withDefault("changed"),
  direction: parseAsStringLiteral(["up", "down"]).withDefault("down"),
  page: parseAsInteger.withDefault(1),
  criterion: parseAsString.withDefault(toCriterionKey(DEFAULT_CRITERION)),
  /** Ids in the compare tray; the first is the reference. */
  compare: parseAsArrayOf(parseAsString).withDefault([]),
};
export type ListView = inferParserType<typeof listAddress>;

export const loadListView = createLoader(listAddress);

export const PAGE_SIZE = 25;
const LONGEST_SEARCH = 120;
const ID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** What is asked of the API. Whatever somebody wrote into the address, the question is a valid one. */
export function toListQuery(view: ListView): SeriesListQuery {
  return {
    search: view.search.slice(0, LONGEST_SEARCH),
    ...(view.state === null ? {} : { state: view.state }),
    ...(view.loudspeaker !== null && ID.test(view.loudspeaker)
      ? { loudspeaker: view.loudspeaker }
      : {}),
    archived: view.archived,
    sort: view.sort,
    direction: view.direction,
    page: Math.min(100_000, Math.max(1, view.page)),
    page_size: PAGE_SIZE,
  };
}

/** A column asked for again turns round; dates and levels begin with the newest and the loudest. */
export function toSort(
  view: Pick<ListView, "sort" | "direction">,
  sort: ListView["sort"],
): Pick<ListView, "sort" | "direction" | "page"> {
  if (view.sort === sort) {
    return { sort, direction: view.direction === "up" ? "down" : "up", page: 1 };
  }
  return { sort, direction: sort === "changed" || sort === "reached" ? "down" : "up", page: 1 };
}

/** The filters that hide rows, in words: "in review", "“osier”". */
export function toFilterWords(view: ListView): string[] {
  const words: string[] = [];
  if (view.state !== null) words.push(view.state);
  if (view.loudspeaker !== null) words.push("one loudspeaker");
  if (view.archived === "yes") words.push("archived");
  return words;
}

export const NO_FILTERS = {
  search: null,
  state: null,
  loudspeaker: null,
  archived: null,
  page: null,
} as const;
