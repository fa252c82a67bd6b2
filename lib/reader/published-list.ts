/** The list of published tests: what a card shows, and which cards a reader asked for. */
import type { SmallWallBand } from "../charts/small-wall";
import type { HearingNotice } from "../exposure/notices";
import { toMaxLevelNotice } from "../exposure/notices";
import type { Snapshot } from "../publication/snapshot-schema";
import { toLimitWords } from "./page-words";

export interface PublishedTest {
  path: string;
  lab: string;
  maker: string;
  model: string;
  kind: string;
  headline: Snapshot["headline"];
  limitWords: string;
  revision: number;
  publishedAt: string;
  bands: SmallWallBand[];
  /** Cause of the band that gives out first. */
  firstCause: Snapshot["bands"][number]["cause"] | null;
  highestRunDb: number;
}

export function toPublishedTest(snapshot: Snapshot, path: string): PublishedTest {
  const first = snapshot.headline?.first ?? null;
  return {
    path,
    lab: snapshot.lab.name,
    maker: snapshot.loudspeaker.maker,
    model: snapshot.loudspeaker.model,
    kind: snapshot.loudspeaker.kind,
    headline: snapshot.headline,
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

export interface PublishedFilter {
  search: string;
  /** First word of the kind, "active"; "" for any. */
  kind: string;
  sort: PublishedSort;
  /** From 1. */
  page: number;
}

/** What an address asks for; what it does not know falls back. */
export function readPublishedFilter(query: URLSearchParams): PublishedFilter {
  const page = Number(query.get("page") ?? "1");
  return {
    search: (query.get("q") ?? "").trim().slice(0, 80),
    kind: (query.get("kind") ?? "").slice(0, 40),
    sort: PUBLISHED_SORTS.find((sort) => sort === query.get("sort")) ?? "newest",
    page: Number.isInteger(page) && page > 0 && page < 1000 ? page : 1,
  };
}

/** "active" of "active, two-way". */
export const toKindWord = (kind: string): string => kind.split(",")[0]?.trim().toLowerCase() ?? "";

/** The kinds that there are, each once. */
export const listKinds = (tests: readonly PublishedTest[]): string[] =>
  [...new Set(tests.map((test) => toKindWord(test.kind)))].filter((word) => word !== "").sort();

/** @param tests newest first. @returns those that match, in the order asked for. */
export function choosePublished(
  tests: readonly PublishedTest[],
  { search, kind, sort }: PublishedFilter,
): PublishedTest[] {
  const words = search.toLowerCase().split(/\s+/).filter(Boolean);
  const found = tests.filter((test) => {
    const name = `${test.maker} ${test.model} ${test.kind} ${test.lab}`.toLowerCase();
    return (
      words.every((word) => name.includes(word)) && (kind === "" || toKindWord(test.kind) === kind)
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
