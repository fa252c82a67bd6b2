"use client";

import { useSyncExternalStore } from "react";

const MINUTE_MS = 60_000;

const subscribe = (onChange: () => void): (() => void) => {
  const timer = setInterval(onChange, MINUTE_MS);
  return () => clearInterval(timer);
};
/** The same number all through a minute: a snapshot must not change by itself. */
const thisMinute = (): number => Math.floor(Date.now() / MINUTE_MS);

/** Now, to the minute; null on the server and while a page takes over from it. */
export function useNow(): Date | null {
  const minute = useSyncExternalStore<number | null>(subscribe, thisMinute, () => null);
  return minute === null ? null : new Date(minute * MINUTE_MS);
}
