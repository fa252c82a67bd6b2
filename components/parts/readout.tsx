import type { ReactNode } from "react";
import { Fragment } from "react";
import { joinClasses } from "./join-classes";

export interface ReadoutItem {
  /** "measured", "THD_F (H2–H7)". */
  name?: string;
  /** With its unit: "96.0 dB". */
  value: ReactNode;
}

interface ReadoutProps {
  /** "63 Hz, 102 dB run". */
  subject: string;
  items: readonly ReadoutItem[];
  /** Boxed on a sheet, or a bare line under a figure. */
  boxed?: boolean;
  /** Speaks when it changes; one figure on a screen at most should. */
  live?: boolean;
  className?: string;
}

/** A fixed line of text by the figure, never a floating box: subject, then values with units. */
export function Readout({ subject, items, boxed = false, live = false, className }: ReadoutProps) {
  return (
    <p
      aria-live={live ? "polite" : undefined}
      className={joinClasses(
        "figures flex flex-wrap items-baseline gap-x-[18px] gap-y-1 text-[13px]/5",
        boxed ? "border border-rule bg-sheet px-3.5 py-2.5" : "py-2.5",
        className,
      )}
    >
      <b className="font-semibold">{subject}</b>
      {items.map((item, at) => (
        <Fragment key={item.name ?? at}>
          <span className="whitespace-nowrap">
            {item.name !== undefined && <span className="text-ink-2">{item.name} </span>}
            {item.value}
          </span>
        </Fragment>
      ))}
    </p>
  );
}
