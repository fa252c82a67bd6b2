"use client";

import { useEffect } from "react";
import type { Theme } from "@/lib/labs/settings-schema";
import { showTheme } from "./theme-switch";

/** On a device that does not know the account's theme yet: shows it, and keeps it for the next first paint. */
export function ThemeKeeper({ theme }: { theme: Theme }) {
  useEffect(() => showTheme(theme), [theme]);
  return null;
}
