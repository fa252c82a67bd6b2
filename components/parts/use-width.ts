"use client";

import { useLayoutEffect, useRef, useState, type RefObject } from "react";

/** The width of an element, px, as it changes; `initial` until it is mounted. */
export function useWidth<Element extends HTMLElement>(
  initial: number,
): [RefObject<Element | null>, number] {
  const ref = useRef<Element>(null);
  const [width, setWidth] = useState(initial);
  useLayoutEffect(() => {
    const element = ref.current;
    if (element === null) return undefined;
    setWidth(element.clientWidth || initial);
    const observer = new ResizeObserver(([entry]) => {
      if (entry !== undefined && entry.contentRect.width > 0) setWidth(entry.contentRect.width);
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, [initial]);
  return [ref, width];
}
