"use client";

import { useEffect, useRef } from "react";
import { joinClasses } from "../parts/join-classes";
import { Kbd } from "../parts/kbd";

const typesText = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || target.matches("input, textarea, select"));

/** Finds series and loudspeakers by name; the "/" key goes there from anywhere. Works without script. */
export function SearchBox({ className }: { className?: string }) {
  const ref = useRef<HTMLInputElement>(null);

  useEffect(() => {
    const onKey = (event: KeyboardEvent): void => {
      if (event.key !== "/" || event.ctrlKey || event.metaKey || event.altKey) return;
      if (typesText(event.target)) return;
      event.preventDefault();
      ref.current?.focus();
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, []);

  return (
    <search className={className}>
      <form action="/series" className="group relative">
        <input
          ref={ref}
          type="search"
          name="search"
          aria-label="Find a series or loudspeaker"
          aria-keyshortcuts="/"
          placeholder="Find a series or loudspeaker"
          onKeyDown={(event) => {
            if (event.key === "Escape") event.currentTarget.blur();
          }}
          className={joinClasses(
            "h-[34px] rounded-control border border-edge bg-sheet pr-9 pl-2.5 text-small text-ink max-md:h-11",
            "w-[250px] transition-[width] duration-quick max-lg:w-12 max-lg:pr-0 max-lg:not-focus:text-transparent max-lg:not-focus:placeholder:text-transparent max-lg:focus:w-[min(250px,60vw)]",
            "[&::-webkit-search-cancel-button]:hidden",
          )}
        />
        <Kbd className="pointer-events-none absolute top-1/2 right-2.5 -translate-y-1/2 group-focus-within:hidden max-lg:right-1/2 max-lg:translate-x-1/2">
          /
        </Kbd>
      </form>
    </search>
  );
}
