/** A browser's own description of itself in two words: "Firefox on Linux". For people to tell sessions apart, never to decide by. */

/** Order matters: most browsers also name the ones that they are like. */
const BROWSERS: readonly (readonly [RegExp, string])[] = [
  [/\bEdgA?\//, "Edge"],
  [/\bOPR\//, "Opera"],
  [/\bSamsungBrowser\//, "Samsung Internet"],
  [/\b(Firefox|FxiOS)\//, "Firefox"],
  [/\b(HeadlessChrome|Chrome|Chromium|CriOS)\//, "Chrome"],
  [/\bSafari\//, "Safari"],
];
const SYSTEMS: readonly (readonly [RegExp, string])[] = [
  [/\biPhone\b/, "iPhone"],
  [/\biPad\b/, "iPad"],
  [/\bAndroid\b/, "Android"],
  [/\bWindows\b/, "Windows"],
  [/\bCrOS\b/, "ChromeOS"],
  [/\bMac OS X\b|\bMacintosh\b/, "Mac"],
  [/\bLinux\b/, "Linux"],
];

const findName = (table: typeof BROWSERS, text: string): string | undefined =>
  table.find(([pattern]) => pattern.test(text))?.[1];

/** @returns "unknown device" where it says nothing that we know. */
export function toDeviceWords(userAgent: string): string {
  const browser = findName(BROWSERS, userAgent);
  const system = findName(SYSTEMS, userAgent);
  if (browser !== undefined && system !== undefined) return `${browser} on ${system}`;
  return browser ?? system ?? "unknown device";
}
