import type { ComponentProps, ReactNode } from "react";
import { joinClasses } from "./join-classes";

/** A dense table: hairlines between rows, an ink line under the head. Wrap in `TableFrame` where it may be wider than its place. */
export function Table({ className, ...rest }: ComponentProps<"table">) {
  return (
    <table
      {...rest}
      className={joinClasses(
        "w-full border-collapse border border-rule bg-sheet text-left",
        className,
      )}
    />
  );
}

interface TableFrameProps {
  /** Names the region that scrolls, for readers. */
  label: string;
  children: ReactNode;
  className?: string;
}

/** Scrolls sideways in its own frame, by keyboard too. */
export function TableFrame({ label, children, className }: TableFrameProps) {
  return (
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-tabindex -- a scrolling region must be reachable by keyboard
    <section aria-label={label} tabIndex={0} className={joinClasses("overflow-x-auto", className)}>
      {children}
    </section>
  );
}

interface ThProps extends ComponentProps<"th"> {
  /** Figures stand at the right, and so does their head. */
  right?: boolean;
}

export function Th({ right = false, className, ...rest }: ThProps) {
  return (
    <th
      scope="col"
      {...rest}
      className={joinClasses(
        "figures border-b border-ink px-2.5 pt-[9px] pb-2 align-bottom text-label font-medium whitespace-nowrap text-ink-2 first:pl-4 last:pr-4",
        right && "text-right",
        className,
      )}
    />
  );
}

interface SortThProps extends ThProps {
  /** Which way this column sorts now; null where another does. */
  sorted: "ascending" | "descending" | null;
  onSort: () => void;
}

/** A head that sorts: bold with a triangle while it does. */
export function SortTh({
  sorted,
  onSort,
  right = false,
  children,
  className,
  ...rest
}: SortThProps) {
  return (
    <Th
      {...rest}
      right={right}
      aria-sort={sorted ?? undefined}
      className={joinClasses("py-0!", className)}
    >
      <button
        type="button"
        onClick={onSort}
        className={joinClasses(
          "inline-flex min-h-[34px] items-center gap-1.5 hover:text-ink max-md:min-h-11",
          sorted !== null && "font-semibold text-ink",
        )}
      >
        {children}
        <svg
          width="9"
          height="6"
          viewBox="0 0 9 6"
          aria-hidden="true"
          className={sorted === null ? "invisible" : undefined}
        >
          <path
            fill="currentColor"
            d={sorted === "ascending" ? "M0 6h9L4.5 0z" : "M0 0h9L4.5 6z"}
          />
        </svg>
      </button>
    </Th>
  );
}

interface TdProps extends ComponentProps<"td"> {
  right?: boolean;
  /** Values, units and file names. */
  figures?: boolean;
}

export function Td({ right = false, figures = false, className, ...rest }: TdProps) {
  return (
    <td
      {...rest}
      className={joinClasses(
        "border-t border-rule px-2.5 py-[7px] align-middle first:pl-4 last:pr-4",
        figures && "figures text-figure whitespace-nowrap",
        right && "text-right",
        className,
      )}
    />
  );
}

interface TrProps extends ComponentProps<"tr"> {
  /** list: 50 px, two lines. table: 40 px. */
  height?: "list" | "table";
  /** Chosen by a person: overprint wash, with a filled box in the row. */
  selected?: boolean;
}

export function Tr({ height = "table", selected = false, className, ...rest }: TrProps) {
  return (
    <tr
      {...rest}
      aria-selected={selected || undefined}
      className={joinClasses(
        height === "list" ? "h-[50px]" : "h-10",
        selected ? "bg-overprint-wash" : "hover:bg-wash",
        className,
      )}
    />
  );
}

/** No value yet: a dot, said as such. */
export function NoValue({ say = "no value yet" }: { say?: string }) {
  return (
    <span className="text-ink-3">
      <span aria-hidden="true">·</span>
      <span className="sr-only">{say}</span>
    </span>
  );
}
