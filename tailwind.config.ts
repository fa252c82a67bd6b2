import type { Config } from "tailwindcss";
import { SAFETY_COLOURS } from "./lib/charts/tokens";

const rem = (px: number): string => `${px / 16}rem`;
const type = (
  size: number,
  line: number,
  weight = 400,
  tracking = 0,
): [string, { lineHeight: string; fontWeight: string; letterSpacing: string }] => [
  rem(size),
  { lineHeight: rem(line), fontWeight: String(weight), letterSpacing: `${tracking}em` },
];

const role = (name: string): string => `var(--${name})`;

/** Roles stand in app/globals.css as variables that follow the theme; see lib/charts/tokens.ts. */
const config: Config = {
  content: ["./app/**/*.{ts,tsx}", "./components/**/*.{ts,tsx}"],
  darkMode: ["selector", '[data-theme="dark"]'],
  theme: {
    colors: {
      transparent: "transparent",
      current: "currentColor",
      inherit: "inherit",
      page: role("page"),
      sheet: role("sheet"),
      wash: role("wash"),
      ink: { DEFAULT: role("ink"), 2: role("ink-2"), 3: role("ink-3") },
      rule: role("rule"),
      edge: role("edge"),
      "on-ink": role("on-ink"),
      overprint: { DEFAULT: role("overprint"), wash: role("overprint-wash") },
      "on-overprint": role("on-overprint"),
      fault: { DEFAULT: role("fault"), wash: role("fault-wash") },
      silt: { line: role("silt-line"), ground: role("silt-ground") },
      noise: role("noise-line"),
      // Hearing notices alone; the same in both themes.
      caution: SAFETY_COLOURS.caution,
      warning: SAFETY_COLOURS.warning,
      black: SAFETY_COLOURS.text,
      white: SAFETY_COLOURS.ground,
    },
    fontFamily: {
      prose: ['"Atkinson Hyperlegible Next Variable"', "system-ui", "sans-serif"],
      figures: ['"Roboto Mono"', "ui-monospace", "monospace"],
    },
    fontSize: {
      hero: type(44, 50, 660, -0.02),
      entry: type(38, 44, 680, -0.018),
      title: type(30, 34, 680, -0.012),
      big: type(22, 28, 640, -0.01),
      section: type(19, 26, 680, -0.004),
      finding: type(16, 22),
      body: type(15, 22),
      small: type(14, 20),
      hint: type(13, 18),
      level: type(15, 20, 600),
      figure: type(13, 18),
      label: type(12, 16),
      cell: type(11, 14),
    },
    screens: { sm: "640px", md: "720px", lg: "1100px", xl: "1440px" },
    borderRadius: { none: "0", control: "2px", key: "3px", full: "9999px" },
    boxShadow: { none: "none", tray: "var(--shadow-tray)" },
    extend: {
      spacing: { gutter: "24px", phone: "18px" },
      transitionDuration: { quick: "120ms" },
      maxWidth: { page: "1920px", prose: "72ch" },
    },
  },
};

export default config;
