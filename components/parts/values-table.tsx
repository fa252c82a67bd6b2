"use client";

import dynamic from "next/dynamic";
import { useState } from "react";
import type { ValuesGridProps } from "./values-grid";

const ValuesGrid = dynamic(() => import("./values-grid").then((module) => module.ValuesGrid), {
  ssr: false,
  loading: () => <p className="mt-2 text-small text-ink-2">Loading the table</p>,
});

interface ValuesTableProps extends ValuesGridProps {
  /** Words of the disclosure. */
  summary?: string;
}

/** Every figure has its numbers as a table, closed until asked for; what sorts it comes with the first look. */
export function ValuesTable({ summary = "Table of values", ...grid }: ValuesTableProps) {
  const [opened, setOpened] = useState(false);
  return (
    <details className="group mt-2" onToggle={() => setOpened(true)}>
      <summary className="inline-flex min-h-[30px] list-none items-center gap-2 text-small underline underline-offset-3 max-md:min-h-11 [&::-webkit-details-marker]:hidden">
        <svg
          className="group-open:rotate-90"
          width="7"
          height="10"
          viewBox="0 0 7 10"
          aria-hidden="true"
        >
          <path d="M1.2 1 5.4 5 1.2 9" fill="none" stroke="currentColor" strokeWidth="1.8" />
        </svg>
        {summary}
        {grid.file !== undefined && ", PNG, SVG, CSV"}
      </summary>
      {opened && <ValuesGrid {...grid} />}
    </details>
  );
}
