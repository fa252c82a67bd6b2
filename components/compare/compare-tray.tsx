"use client";

import { useQueries } from "@tanstack/react-query";
import type { SeriesRow } from "@/lib/api/series";
import { letterOf } from "@/lib/compare/compare-words";
import { Button, LinkButton } from "../parts/button";
import { seriesQuery } from "../queries/series";
import { toCompareHref } from "./compare-address";

interface CompareTrayProps {
  chosen: readonly string[];
  /** The rows that are on the page: their names need no asking. */
  rows: readonly SeriesRow[];
  onRemove: (id: string) => void;
  onClear: () => void;
}

/** What was picked for comparing, at the foot of the list. */
export function CompareTray({ chosen, rows, onRemove, onClear }: CompareTrayProps) {
  const known = new Map(rows.map((row) => [row.id, row.loudspeaker.model]));
  const asked = useQueries({
    queries: chosen.map((id) => ({ ...seriesQuery(id), enabled: !known.has(id) })),
  });
  const nameOf = (id: string, at: number): string =>
    known.get(id) ?? asked[at]?.data?.loudspeaker.model ?? (asked[at]?.isError ? "gone" : "…");
  return (
    <section
      aria-label="Compare tray"
      className="sticky bottom-0 z-20 mt-auto flex flex-wrap items-center gap-x-4 gap-y-2 border-t-3 max-md:gap-2 border-overprint bg-sheet px-gutter py-3 max-md:px-phone"
    >
      <h2 className="text-body font-semibold max-md:sr-only">Compare</h2>
      <ol className="contents">
        {chosen.map((id, at) => {
          const name = nameOf(id, at);
          return (
            <li
              key={id}
              className="inline-flex items-center gap-2.5 rounded-control border border-edge pl-3 max-md:gap-1.5 max-md:pl-2"
            >
              <span className="figures text-label font-medium text-overprint">{letterOf(at)}</span>
              <span className="font-semibold">{name}</span>
              <button
                type="button"
                aria-label={`Take ${name} out`}
                className="grid size-9 place-items-center max-md:size-11"
                onClick={() => onRemove(id)}
              >
                <span aria-hidden="true">✕</span>
              </button>
            </li>
          );
        })}
      </ol>
      <p className="mr-auto text-small text-ink-2 max-md:w-full max-md:text-label">
        {chosen.length === 1 ? "Pick one more." : "Four at most."} The first is the reference.
      </p>
      <Button tone="quiet" onClick={onClear}>
        Clear
      </Button>
      {chosen.length > 1 && (
        <LinkButton href={toCompareHref(chosen)} tone="decision">
          Compare {chosen.length}
        </LinkButton>
      )}
    </section>
  );
}
