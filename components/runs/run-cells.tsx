/** The cells of a row of recordings: columns on a desk, lines of a card on a phone. */
import type { ReactNode } from "react";
import type { RunView } from "@/lib/api/runs";
import { joinClasses } from "../parts/join-classes";
import { NoValue } from "../parts/table";
import { Verdict } from "../parts/verdict";
import { toRunFigures, type VerdictWords } from "./verdict-words";

export const COLUMNS = 9;

interface RowFrameProps {
  dim: boolean;
  /** A take below its run: no line above. */
  flush: boolean;
  children: ReactNode;
}

export function RowFrame({ dim, flush, children }: RowFrameProps) {
  return (
    <tr
      className={joinClasses(
        "h-11 max-md:grid max-md:h-auto max-md:grid-cols-2 max-md:gap-x-4 max-md:gap-y-1 max-md:px-phone max-md:py-3",
        !flush && "border-t border-rule",
        dim && "text-ink-2",
      )}
    >
      {children}
    </tr>
  );
}

const CELL = "px-[9px] py-[7px] align-middle text-figure whitespace-nowrap max-md:p-0";

export function Cell({ children, className }: { children: ReactNode; className?: string }) {
  return <td className={joinClasses(CELL, className)}>{children}</td>;
}

export function NameCell({ children }: { children: ReactNode }) {
  return (
    <th scope="row" className={joinClasses(CELL, "pl-4 text-left max-md:col-span-2 max-md:pl-0")}>
      <span className="figures flex items-center gap-2.5 text-[15px]/5 font-semibold max-md:flex-wrap">
        {children}
      </span>
    </th>
  );
}

export function FileCell({ name }: { name: string | null }) {
  return (
    <Cell
      className={joinClasses(
        "max-w-60 max-md:col-span-2 max-md:max-w-full",
        name === null && "max-md:hidden",
      )}
    >
      <span className="figures block truncate text-figure" title={name ?? undefined}>
        {name ?? <NoValue say="no file yet" />}
      </span>
    </Cell>
  );
}

export function FigureCells({ run }: { run: RunView | null }) {
  const figures = toRunFigures(run);
  const cells = [
    ["length", "length", figures.length],
    ["peak", "input peak, dBFS", figures.peak],
    ["level", "level, dB", figures.level],
    ["snr", "signal-to-noise", figures.snr],
  ] as const;
  return cells.map(([column, label, value]) => (
    <td
      key={column}
      className={joinClasses(
        CELL,
        "figures text-right text-figure max-md:flex max-md:justify-between max-md:gap-2",
        value === null && "max-md:hidden",
        figures.faulty.has(column) && "font-semibold text-fault",
      )}
    >
      <span aria-hidden="true" className="text-label text-ink-2 md:hidden">
        {label}
      </span>
      {value ?? <NoValue />}
    </td>
  ));
}

export function VerdictCell({ verdict }: { verdict: VerdictWords }) {
  return (
    <Cell className="max-w-72 text-body whitespace-normal! md:min-w-60 max-md:col-span-2 max-md:mt-1">
      <Verdict kind={verdict.kind} note={verdict.note ?? undefined}>
        {verdict.words}
      </Verdict>
    </Cell>
  );
}

export function ActsCell({ children }: { children: ReactNode }) {
  return <Cell className="pr-4 text-right max-md:col-span-2 max-md:text-left">{children}</Cell>;
}
