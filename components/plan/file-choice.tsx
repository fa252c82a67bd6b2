"use client";

import { useId, useRef, type ReactNode } from "react";
import { Button } from "../parts/button";

interface FileChoiceProps {
  /** "Add a photo", "Choose a microphone file". */
  words: string;
  accept: string;
  onChoose: (file: File) => void;
  /** The file is on its way. */
  busy?: boolean;
  /** What is chosen, beside the button. */
  children?: ReactNode;
}

/** The browser's own file dialog behind one of our buttons. */
export function FileChoice({ words, accept, onChoose, busy = false, children }: FileChoiceProps) {
  const ref = useRef<HTMLInputElement>(null);
  const id = useId();
  return (
    <div className="flex flex-wrap items-center gap-3">
      <Button size="small" busy={busy} aria-controls={id} onClick={() => ref.current?.click()}>
        {words}
      </Button>
      <input
        ref={ref}
        id={id}
        type="file"
        accept={accept}
        aria-label={words}
        tabIndex={-1}
        className="sr-only"
        onChange={(event) => {
          const [file] = event.target.files ?? [];
          if (file !== undefined) onChoose(file);
          // The same file may be chosen again.
          event.target.value = "";
        }}
      />
      {children}
    </div>
  );
}
