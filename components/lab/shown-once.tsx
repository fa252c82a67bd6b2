"use client";

import { useEffect, useId, useRef, useState, type ReactNode } from "react";
import { Button } from "../parts/button";
import { TextInput } from "../parts/field";

interface ShownOnceProps {
  /** "The link for bo@lab.example". */
  title: string;
  /** What the secret is called: "one-time link". */
  label: string;
  secret: string;
  /** What to do with it, how long it is good. */
  children: ReactNode;
  onDone: () => void;
}

/** A secret that the server has forgotten already: it can be copied now, and only now. */
export function ShownOnce({ title, label, secret, children, onDone }: ShownOnceProps) {
  const id = useId();
  const ref = useRef<HTMLInputElement>(null);
  const [copied, setCopied] = useState<"no" | "yes" | "by-hand">("no");

  // The form that had the focus is gone; the next act is to copy what came of it.
  useEffect(() => ref.current?.focus(), []);

  const copy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(secret);
      setCopied("yes");
    } catch {
      // No clipboard on a plain http address, or it was refused: the text is marked instead.
      ref.current?.select();
      setCopied("by-hand");
    }
  };

  return (
    <section
      aria-labelledby={`${id}title`}
      className="border-l-4 border-overprint bg-overprint-wash px-4 py-3.5"
    >
      <h3 id={`${id}title`} className="text-section">
        {title}
      </h3>
      <p className="mt-1 max-w-prose">{children}</p>
      <label htmlFor={`${id}secret`} className="figures mt-3 mb-[5px] block text-label font-medium">
        {label}
      </label>
      <div className="flex flex-wrap gap-2.5">
        <TextInput
          ref={ref}
          id={`${id}secret`}
          figures
          readOnly
          value={secret}
          onFocus={(event) => event.currentTarget.select()}
          className="min-w-0 flex-[1_1_260px]"
        />
        <Button tone="decision" size="form" onClick={() => void copy()}>
          Copy
        </Button>
        <Button size="form" onClick={onDone}>
          Done
        </Button>
      </div>
      <output className="mt-1.5 block min-h-5 text-small">
        {copied === "yes" && "Copied."}
        {copied === "by-hand" && "It is marked: copy it with Ctrl+C, or ⌘C."}
      </output>
    </section>
  );
}
