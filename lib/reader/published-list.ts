/** The list of published tests: what a card shows, and which cards a reader asked for. */
import type { SmallWallBand } from "../charts/small-wall";
import type { HearingNotice } from "../exposure/notices";
import { toMaxLevelNotice } from "../exposure/notices";
import { MOST_COMPARED } from "../compare/comparison-schema";
import { toNewestPath } from "../publication/addresses";
import type { Snapshot } from "../publication/snapshot-schema";
import { toCriterionKey } from "../result/criteria";
import { toLimitWords } from "./page-words";

export interface PublishedTest {
  /** "saltmarsh/osier-8a": names it in a comparison. */
  key: string;
  path: string;
  lab: string;
  maker: string;
  model: string;
  kind: string;
  headline: Snapshot["headline"];
  /** "thd10-comp3" */
  criterionKey: string;
  limitWords: string;
  revision: number;
  publishedAt: string;
  bands: SmallWallBand[];
  /** Cause of the band that gives out first. */
  firstCause: Snapshot["bands"][number]["cause"] | null;
  highestRunDb: number;
}

/** @param slug of the series' address */
export function toPublishedTest(snapshot: Snapshot, slug: string): PublishedTest {
  const first = snapshot.headline?.first ?? null;
  return {
    key: `${snapshot.lab.slug}/${slug}`,
    path: toNewestPath(snapshot.lab.slug, slug),
    lab: snapshot.lab.name,
    maker: snapshot.loudspeaker.maker,
    model: snapshot.loudspeaker.model,
    kind: snapshot.loudspeaker.kind,
    headline: snapshot.headline,
    criterionKey: toCriterionKey(snapshot.criterion),
    limitWords: toLimitWords(snapshot.criterion),
    revision: snapshot.revision,
    publishedAt: snapshot.published_at,
    bands: snapshot.bands.map((band) => {
      const measured = band.levels.flatMap((level) => level.spl_dB ?? []);
      return {
        nominal_Hz: band.nominal_Hz,
        status: band.limit.status,
        spl_dB: band.limit.spl_dB,
        reached_dB: measured.length === 0 ? null : Math.max(...measured),
      };
    }),
    firstCause: snapshot.bands.find((band) => band.nominal_Hz === first?.nominal_Hz)?.cause ?? null,
    highestRunDb: Math.max(...snapshot.measured.levels_dB),
  };
}

export const PUBLISHED_SORTS = ["newest", "loudest", "name"] as const;
type PublishedSort = (typeof PUBLISHED_SORTS)[number];

/** "Reached at least so much": what a reader may ask for, dB SPL at 1 m. */
export const PUBLISHED_SIZES_DB = [85, 90, 95, 100, 105] as const;

export interface PublishedFilter {
  search: string;
  /** First word of the kind, "active"; "" for any. */
  kind: string;
  /** "" for any. */
  maker: string;
  lab: string;
  /** Key of the criterion; "" for any. */
  criterion: string;
  /** The headline's level is this or more; null for any. */
  fromDb: number | null;
  sort: PublishedSort;
  /** From 1. */
  page: number;
  /** Keys of the tests picked for comparing; the first is the reference. */
  chosen: readonly string[];
}

const KEY = /^[a-z0-9-]{1,80}\/[a-z0-9-]{1,80}$/;

/** Keys of tests in an address, each once, four at most. */
export const readChosen = (text: string | null): string[] =>
  [...new Set((text ?? "").split(",").filter((key) => KEY.test(key)))].slice(0, MOST_COMPARED);

/** What an address asks for; what it does not know falls back. */
export function readPublishedFilter(query: URLSearchParams): PublishedFilter {
  const page = Number(query.get("page") ?? "1");
  const text = (name: string, most: number): string =>
    (query.get(name) ?? "").trim().slice(0, most);
  return {
    search: text("q", 80),
    kind: text("kind", 40),
    maker: text("maker", 120),
    lab: text("lab", 120),
    criterion: text("limit", 40),
    fromDb: PUBLISHED_SIZES_DB.find((db) => String(db) === query.get("from")) ?? null,
    sort: PUBLISHED_SORTS.find((sort) => sort === query.get("sort")) ?? "newest",
    page: Number.isInteger(page) && page > 0 && page < 1000 ? page : 1,
    chosen: readChosen(query.get("t")),
  };
}

/** The same list in an address, with changes; what is as usual is left out. */
export function toPublishedHref(
  filter: PublishedFilter,
  change: Partial<PublishedFilter> = {},
): string {
  const view = { ...filter, ...change };
  const parts: readonly (readonly [string, string])[] = [
    ["q", view.search],
    ["kind", view.kind],
    ["maker", view.maker],
    ["lab", view.lab],
    ["limit", view.criterion],
    ["from", view.fromDb === null ? "" : String(view.fromDb)],
    ["sort", view.sort === "newest" ? "" : view.sort],
    ["page", view.page === 1 ? "" : String(view.page)],
    ["t", view.chosen.join(",")],
  ];
  const query = new URLSearchParams(
    parts.filter(([, value]) => value !== "").map(([name, value]) => [name, value]),
  ).toString();
  return query === "" ? "/published" : `/published?${query}`;
}

export const toComparePath = (keys: readonly string[]): string =>
  keys.length === 0
    ? "/published/compare"
    : `/published/compare?t=${keys.map((key) => encodeURIComponent(key)).join(",")}`;

/** "active" of "active, two-way". */
export const toKindWord = (kind: string): string => kind.split(",")[0]?.trim().toLowerCase() ?? "";

export interface PublishedChoices {
  kinds: string[];
  makers: string[];
  labs: string[];
  criteria: { key: string; words: string }[];
}

/** What there is to filter by, each once. */
export function listChoices(tests: readonly PublishedTest[]): PublishedChoices {
  const distinct = (words: readonly string[]): string[] =>
    [...new Set(words)].filter((word) => word !== "").sort((a, b) => a.localeCompare(b, "en"));
  const criteria = new Map(tests.map((test) => [test.criterionKey, test.limitWords]));
  return {
    kinds: distinct(tests.map((test) => toKindWord(test.kind))),
    makers: distinct(tests.map((test) => test.maker)),
    labs: distinct(tests.map((test) => test.lab)),
    criteria: [...criteria].map(([key, words]) => ({ key, words })),
  };
}

/** @param tests newest first. @returns those that match, in the order asked for. */
export function choosePublished(
  tests: readonly PublishedTest[],
  { search, kind, maker, lab, criterion, fromDb, sort }: PublishedFilter,
): PublishedTest[] {
  const words = search.toLowerCase().split(/\s+/).filter(Boolean);
  const found = tests.filter((test) => {
    const name = `${test.maker} ${test.model} ${test.kind} ${test.lab}`.toLowerCase();
    return (
      words.every((word) => name.includes(word)) &&
      (kind === "" || toKindWord(test.kind) === kind) &&
      (maker === "" || test.maker === maker) &&
      (lab === "" || test.lab === lab) &&
      (criterion === "" || test.criterionKey === criterion) &&
      (fromDb === null || (test.headline?.spl_dB ?? -Infinity) >= fromDb)
    );
  });
  if (sort === "name") return found.toSorted((a, b) => a.model.localeCompare(b.model, "en"));
  if (sort === "loudest") {
    const level = (test: PublishedTest): number => test.headline?.spl_dB ?? -Infinity;
    return found.toSorted((a, b) => (level(a) === level(b) ? 0 : level(b) - level(a)));
  }
  return found;
}

/** For the loudest level that stands in the list; null where none does. */
export function toListNotice(tests: readonly PublishedTest[]): HearingNotice | null {
  const levels = tests
    .flatMap((test) => test.bands)
    .flatMap((band) => [band.reached_dB ?? [], band.spl_dB ?? []].flat());
  return levels.length === 0
    ? null
    : toMaxLevelNotice({
        levelDb: Math.max(...levels),
        distanceM: 1,
        atLeast: tests.some((test) => test.bands.some((band) => band.status === "not reached")),
      });
}
