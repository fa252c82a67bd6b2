"use client";

import { useEffect, useState, type ReactNode } from "react";
import { Button } from "./button";
import { joinClasses } from "./join-classes";

interface EmptyStateProps {
  /** "No series yet". */
  title: string;
  /** What the thing is, in a sentence. */
  children: ReactNode;
  /** One action; who lacks the right reads who has it, in `children`. */
  actions?: ReactNode;
  /** The true frame of the figure that will stand here. */
  figure?: ReactNode;
  className?: string;
}

export function EmptyState({ title, children, actions, figure, className }: EmptyStateProps) {
  return (
    <section
      className={joinClasses(
        "border border-rule bg-sheet px-6 py-[22px] max-md:px-phone",
        className,
      )}
    >
      {figure !== undefined && <div className="mb-3">{figure}</div>}
      <h2 className="text-big">{title}</h2>
      <div className="mt-1 max-w-prose text-ink-2">{children}</div>
      {actions !== undefined && (
        <div className="mt-3.5 flex flex-wrap items-center gap-2.5">{actions}</div>
      )}
    </section>
  );
}

interface LoadingStateProps {
  /** "Loading the series". */
  label: string;
  /** The frame and axes, which are known already. */
  figure?: ReactNode;
  /** Offered after 8 s. */
  onRetry?: () => void;
}

/** Plain blocks after 300 ms, no movement; after 8 s it says so. */
export function LoadingState({ label, figure, onRetry }: LoadingStateProps) {
  const [stage, setStage] = useState<"quiet" | "blocks" | "slow">("quiet");
  useEffect(() => {
    const blocks = setTimeout(() => setStage("blocks"), 300);
    const slow = setTimeout(() => setStage("slow"), 8000);
    return () => {
      clearTimeout(blocks);
      clearTimeout(slow);
    };
  }, []);
  return (
    <output aria-label={label} className="block min-h-24">
      {stage !== "quiet" && (
        <>
          <span className="block h-6 w-52 max-w-full bg-wash" />
          <span className="mt-2.5 block h-3 w-[420px] max-w-full bg-wash" />
          {figure !== undefined && <div className="mt-4">{figure}</div>}
        </>
      )}
      {stage === "slow" && (
        <p className="mt-4 flex flex-wrap items-center gap-3 text-ink-2">
          Still loading. The server is slow today.
          {onRetry !== undefined && (
            <Button size="small" onClick={onRetry}>
              Try again
            </Button>
          )}
        </p>
      )}
    </output>
  );
}

interface ConnectionBarProps {
  /** "No connection since 10:42. Your 3 decisions are kept here and sent when it returns." */
  children: ReactNode;
  onRetry: () => void;
}

/** A bar under the header, not a dialog. */
export function ConnectionBar({ children, onRetry }: ConnectionBarProps) {
  return (
    <output className="flex items-center gap-3 bg-ink px-gutter py-2.5 text-on-ink max-md:px-phone">
      <p className="mr-auto">{children}</p>
      <Button
        size="small"
        onClick={onRetry}
        className="border-current! bg-transparent! text-inherit!"
      >
        Try now
      </Button>
    </output>
  );
}
