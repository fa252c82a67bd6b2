import type { ReactNode } from "react";
import { joinClasses } from "./join-classes";

/** ok: passed. warned: passed, with a warning. bad: a fault. wait: checking or due. going: under way. locked: not open yet. */
export type VerdictKind = "ok" | "warned" | "bad" | "wait" | "going" | "locked";

interface VerdictMarkProps {
  kind: VerdictKind;
  size?: number;
  /** Words where none stand beside the mark. */
  label?: string;
}

export function VerdictMark({ kind, size = 14, label }: VerdictMarkProps) {
  return (
    <svg
      className="flex-none"
      width={size}
      height={size}
      viewBox={kind === "locked" ? "-0.5 0 14 14" : "0 0 14 14"}
      role={label === undefined ? undefined : "img"}
      aria-label={label}
      aria-hidden={label === undefined ? true : undefined}
    >
      {SHAPES[kind]}
    </svg>
  );
}

const PEN = { fill: "none", stroke: "currentColor", strokeWidth: 1.5 };
const TICK = <path {...PEN} strokeWidth={2.2} d="M2 7.5 5.6 11 12 3.5" />;
const SHAPES: Record<VerdictKind, ReactNode> = {
  ok: TICK,
  warned: TICK,
  bad: (
    <path
      fill="currentColor"
      fillRule="evenodd"
      d="M1 1h12v12H1zM4.8 3.6 3.6 4.8 5.8 7 3.6 9.2l1.2 1.2L7 8.2l2.2 2.2 1.2-1.2L8.2 7l2.2-2.2-1.2-1.2L7 5.8z"
    />
  ),
  wait: <rect {...PEN} x="1.8" y="1.8" width="10.4" height="10.4" strokeDasharray="2.6 2" />,
  going: (
    <>
      <rect {...PEN} x="1.8" y="1.8" width="10.4" height="10.4" />
      <rect fill="currentColor" x="1.8" y="7" width="10.4" height="5.2" />
    </>
  ),
  locked: <path {...PEN} d="M1.5 6.5h10v6.7h-10zM3.7 6.3V4.2a2.8 2.8 0 0 1 5.6 0v2.1" />,
};

interface VerdictProps {
  kind: VerdictKind;
  /** "matches plan", "clipped input". */
  children: ReactNode;
  /** A second line in figures: "steady within 0.02 dB". */
  note?: ReactNode;
}

/** A verdict is a mark and words; a fault is bold in the fault colour. */
export function Verdict({ kind, children, note }: VerdictProps) {
  return (
    <span className="inline-block">
      <span
        className={joinClasses(
          "inline-flex items-center gap-1.5",
          kind === "bad" && "font-semibold text-fault",
          (kind === "locked" || kind === "wait") && "text-ink-2",
        )}
      >
        <VerdictMark kind={kind} />
        {children}
      </span>
      {note !== undefined && (
        <span className="figures block pl-5 text-label text-ink-2">{note}</span>
      )}
    </span>
  );
}
