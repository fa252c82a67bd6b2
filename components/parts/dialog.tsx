"use client";

import { useEffect, useId, useRef, type ReactNode } from "react";
import { Button } from "./button";

interface DialogProps {
  open: boolean;
  /** Called on Esc, on the close button, and on a press outside. */
  onClose: () => void;
  title: string;
  children: ReactNode;
  /** Buttons; the deciding one first. A "Cancel" is added at the end. */
  actions?: ReactNode;
  cancelWords?: string;
}

/**
 * A question over the page, for what cannot be undone. The browser's own dialog keeps the focus
 * inside, answers Esc and needs no style of its own injected, which the page's policy forbids.
 */
export function Dialog({
  open,
  onClose,
  title,
  children,
  actions,
  cancelWords = "Cancel",
}: DialogProps) {
  const ref = useRef<HTMLDialogElement>(null);
  const titleId = useId();

  useEffect(() => {
    const dialog = ref.current;
    if (dialog === null) return;
    if (open && !dialog.open) dialog.showModal();
    if (!open && dialog.open) dialog.close();
  }, [open]);

  return (
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions -- a press outside closes; Esc does the same
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      onClose={onClose}
      onClick={(event) => {
        if (event.target === event.currentTarget) onClose();
      }}
      onKeyDown={(event) => {
        // The page's single-key commands rest while a question stands.
        event.stopPropagation();
      }}
      className="m-auto w-[min(520px,calc(100vw-36px))] border border-edge bg-sheet p-0 text-ink shadow-tray backdrop:bg-black/40"
    >
      {open && (
        <div className="px-6 pt-5 pb-6">
          <h2 id={titleId}>{title}</h2>
          <div className="mt-2">{children}</div>
          <div className="mt-5 flex flex-wrap items-center gap-2.5">
            {actions}
            <Button tone="quiet" onClick={onClose}>
              {cancelWords}
            </Button>
          </div>
        </div>
      )}
    </dialog>
  );
}
