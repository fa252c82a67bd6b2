import type { ReactNode } from "react";
import { joinClasses } from "./join-classes";

interface FaultBarProps {
  /** What happened: "Analysis stopped at the 96 dB run". */
  title: string;
  /** What it spoils, what is safe. */
  children?: ReactNode;
  /** Buttons, the likeliest remedy first. */
  actions?: ReactNode;
  /** Time and report number, in figures; can be selected for copying. */
  report?: string;
  /** kept: known and accepted, drawn in the edge colour. */
  tone?: "fault" | "kept";
  /** Whole screens speak up at once; parts of a table that were there before do not. */
  announce?: boolean;
  className?: string;
}

/** A bar at the left, the cause in plain words, what is safe, then the remedies in order. */
export function FaultBar({
  title,
  children,
  actions,
  report,
  tone = "fault",
  announce = true,
  className,
}: FaultBarProps) {
  return (
    <section
      role={announce ? "alert" : undefined}
      className={joinClasses(
        "border-l-4 py-0.5 pl-4",
        tone === "fault" ? "border-fault" : "border-edge",
        className,
      )}
    >
      <h3 className="text-section">{title}</h3>
      {children !== undefined && <div className="mt-1 max-w-prose">{children}</div>}
      {actions !== undefined && (
        <div className="mt-3 flex flex-wrap items-center gap-2.5">{actions}</div>
      )}
      {report !== undefined && (
        <p className="figures mt-3 text-label text-ink-2 select-all">{report}</p>
      )}
    </section>
  );
}
