import { THEMES, type Theme } from "../labs/settings-schema";

/** The account's theme is repeated in this cookie, so that the first paint is right. */
export const THEME_COOKIE = "tidemark-theme";

/** @returns the theme named, or "system" for anything else: a cookie is not to be trusted. */
export const parseTheme = (text: string | null | undefined): Theme =>
  THEMES.find((theme) => theme === text) ?? "system";
