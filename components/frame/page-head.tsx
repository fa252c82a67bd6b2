import Link from "next/link";
import type { ReactNode } from "react";

interface PageHeadProps {
  title: ReactNode;
  /** Where we are: `{ href: "/series", label: "Series" }`, then the number. */
  crumb?: { href: string; label: string; here: string };
  /** A line in figures: "Withy Lane · active, two-way, 8 in · unit 0417". */
  line?: ReactNode;
  /** At the right: the five boxes, or the main button. */
  aside?: ReactNode;
  /** The aside takes half the width (boxes) instead of its own (a button). */
  wideAside?: boolean;
}

/** The head of a page: answer first. */
export function PageHead({ title, crumb, line, aside, wideAside = false }: PageHeadProps) {
  return (
    <div
      className={`grid items-end gap-x-10 gap-y-3.5 px-gutter pt-5 pb-3.5 max-md:px-phone ${
        wideAside
          ? "lg:grid-cols-[minmax(0,1fr)_minmax(560px,700px)]"
          : "sm:grid-cols-[minmax(0,1fr)_auto]"
      }`}
    >
      <div className="min-w-0">
        {crumb !== undefined && (
          <p className="mb-1 text-[14px]/[18px] text-ink-2">
            <Link href={crumb.href}>{crumb.label}</Link> / {crumb.here}
          </p>
        )}
        <h1 className="break-words">{title}</h1>
        {line !== undefined && <p className="figures mt-[3px] text-label text-ink-2">{line}</p>}
      </div>
      {aside !== undefined && <div className="min-w-0">{aside}</div>}
    </div>
  );
}
