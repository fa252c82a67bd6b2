"use client";

import Link from "next/link";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { letterOf } from "@/lib/compare/compare-words";
import type { ComparisonTest } from "@/lib/compare/comparison-schema";
import { Button } from "../parts/button";
import { LetterBox } from "./letter-box";

interface ComparePicksProps {
  tests: readonly ComparisonTest[];
  onReference: (id: string) => void;
  onRemove: (id: string) => void;
}

/** Who is compared: the reference first, each with the way to switch or to leave. */
export function ComparePicks({ tests, onReference, onRemove }: ComparePicksProps) {
  return (
    <ol
      aria-label="Compared loudspeakers"
      className="mx-gutter mb-4 grid border-y border-rule max-md:mx-phone sm:grid-cols-2 xl:grid-cols-4"
    >
      {tests.map((test, at) => (
        <li
          key={test.id}
          className="grid grid-cols-[22px_minmax(0,1fr)_auto] items-center gap-x-2.5 gap-y-0.5 border-rule py-3 not-first:max-sm:border-t sm:px-4 sm:not-first:border-l sm:first:pl-0"
        >
          <LetterBox at={at} />
          <Link
            href={test.path}
            aria-label={`${letterOf(at)}: ${test.model}`}
            className="text-[17px]/6 font-[680] break-words"
          >
            {test.model}
          </Link>
          <span className="flex items-center">
            {at === 0 ? (
              <span className="px-1.5 text-small text-ink-2">reference</span>
            ) : (
              <Button tone="quiet" size="small" onClick={() => onReference(test.id)}>
                Make reference
              </Button>
            )}
            <Button
              tone="quiet"
              size="small"
              aria-label={`Remove ${test.model}`}
              className="min-w-[30px] no-underline!"
              onClick={() => onRemove(test.id)}
            >
              <span aria-hidden="true">✕</span>
            </Button>
          </span>
          <p className="figures col-span-3 text-label text-ink-2">
            {test.maker} · {test.environment}, {formatPlain(test.distance_m)}
            {NBSP}m · {test.number}
          </p>
        </li>
      ))}
    </ol>
  );
}
