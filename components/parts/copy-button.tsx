"use client";

import { useState } from "react";
import { Button, type ButtonSize, type ButtonTone } from "./button";

interface CopyButtonProps {
  text: string;
  /** "Copy code". */
  children: string;
  /** Where the clipboard is refused, this is marked instead, to be copied by hand. */
  markId: string;
  tone?: ButtonTone;
  size?: ButtonSize;
}

/** Puts a text on the clipboard and says so. */
export function CopyButton({ text, children, markId, tone, size = "small" }: CopyButtonProps) {
  const [copied, setCopied] = useState<"no" | "yes" | "by-hand">("no");
  const copy = async (): Promise<void> => {
    try {
      await navigator.clipboard.writeText(text);
      setCopied("yes");
    } catch {
      // No clipboard on a plain http address, or it was refused.
      const place = document.getElementById(markId);
      if (place !== null) getSelection()?.selectAllChildren(place);
      setCopied("by-hand");
    }
  };
  return (
    <span className="inline-flex flex-wrap items-center gap-3">
      <Button size={size} {...(tone === undefined ? {} : { tone })} onClick={() => void copy()}>
        {children}
      </Button>
      <output className="text-small">
        {copied === "yes" && "Copied."}
        {copied === "by-hand" && "It is marked: copy it with Ctrl+C, or ⌘C."}
      </output>
    </span>
  );
}
