"use client";

import { createContext, use, useMemo, useState, type ReactNode } from "react";

interface Crosshair {
  /** Nominal frequency of the band under the pointer; null where there is none. */
  hoveredHz: number | null;
  hover: (nominalHz: number | null) => void;
}

const CrosshairContext = createContext<Crosshair>({ hoveredHz: null, hover: () => undefined });

/** One crosshair for all figures on a screen: put it around them; each figure reads and moves it. */
export function CrosshairProvider({ children }: { children: ReactNode }) {
  const [hoveredHz, hover] = useState<number | null>(null);
  const value = useMemo(() => ({ hoveredHz, hover }), [hoveredHz]);
  return <CrosshairContext value={value}>{children}</CrosshairContext>;
}

export const useCrosshair = (): Crosshair => use(CrosshairContext);
