"use client";

import { useState } from "react";
import { THEME_COOKIE } from "@/lib/account/theme";
import { THEMES, type Theme } from "@/lib/labs/settings-schema";
import { SegmentedControl } from "../parts/segmented-control";

const WORDS: Record<Theme, string> = { system: "as the device", light: "light", dark: "dark" };
const YEAR_S = 365 * 24 * 3600;

/** Shows a theme at once and keeps it for the next first paint. */
export function showTheme(theme: Theme): void {
  if (theme === "system") delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = theme;
  document.cookie = `${THEME_COOKIE}=${theme}; path=/; max-age=${YEAR_S}; samesite=lax`;
}

interface ThemeSwitchProps {
  /** The account's theme. */
  value: Theme;
  /** Saves it with the account; the page has changed already. */
  onChange: (theme: Theme) => void;
}

export function ThemeSwitch({ value, onChange }: ThemeSwitchProps) {
  const [theme, setTheme] = useState(value);
  return (
    <SegmentedControl
      legend="theme"
      segments={THEMES.map((name) => ({ value: name, label: WORDS[name] }))}
      value={theme}
      onChange={(next) => {
        setTheme(next);
        showTheme(next);
        onChange(next);
      }}
    />
  );
}
