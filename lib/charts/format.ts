/**
 * Numbers in words and figures, the same on every screen: true minus, one decimal, a non-breaking
 * space before units, limits and times rounded down, the level at the ear rounded up.
 */
export const NBSP = "\u00A0";
const MINUS = "\u2212";
const THIN = "\u2009";

/** Float noise below this never tips a rounding: 101.00000000000001 is 101. */
const NOISE = 1e-9;

const withMinus = (text: string): string => text.replace("-", MINUS);

/** "94.0", "−0.1"; zero never carries a sign. */
export function formatNumber(value: number, decimals = 1): string {
  const text = value.toFixed(decimals);
  return withMinus(Number(text) === 0 ? text.replace("-", "") : text);
}

/** "+7.7", "−0.1"; a value that rounds to zero keeps its sign, because it was measured. */
export function formatSigned(value: number, decimals = 1): string {
  const sign = value < 0 || Object.is(value, -0) ? MINUS : "+";
  return `${sign}${Math.abs(value).toFixed(decimals)}`;
}

/** "94.0 dB". */
export const formatDb = (valueDb: number, decimals = 1): string =>
  `${formatNumber(valueDb, decimals)}${NBSP}dB`;

/** "+7.7 dB". */
export const formatSignedDb = (valueDb: number, decimals = 1): string =>
  `${formatSigned(valueDb, decimals)}${NBSP}dB`;

/** A planned level: "76 dB", with a decimal only where it has one. */
export const formatLevel = (levelDb: number): string => `${formatPlain(levelDb)}${NBSP}dB`;

/** Up to two decimals, none that are not needed: "76", "11.05". */
export const formatPlain = (value: number): string =>
  withMinus(String(Math.round(value * 100) / 100));

/** A limit for readers: whole decibels, rounded down. */
export const formatLimitDown = (limitDb: number): string =>
  `${withMinus(String(Math.floor(limitDb + NOISE)))}${NBSP}dB`;

/** A level at the ear, or a largest level in a notice: whole decibels, rounded up. */
export const roundLevelUp = (levelDb: number): number => Math.ceil(levelDb - NOISE);
export const roundLimitDown = (limitDb: number): number => Math.floor(limitDb + NOISE);

/** Band or frequency: "63 Hz", "2 kHz", "12.5 kHz". */
export function formatFrequency(frequencyHz: number): string {
  const [text, kilo] = toFrequencyText(frequencyHz);
  return `${text}${NBSP}${kilo ? "kHz" : "Hz"}`;
}

/** On an axis: "63", "2k", "12.5k". */
export function formatFrequencyShort(frequencyHz: number): string {
  const [text, kilo] = toFrequencyText(frequencyHz);
  return kilo ? `${text}k` : text;
}

function toFrequencyText(frequencyHz: number): [text: string, kilo: boolean] {
  const kilo = Number(frequencyHz.toPrecision(3)) >= 1000;
  return [String(Number((kilo ? frequencyHz / 1000 : frequencyHz).toPrecision(3))), kilo];
}

/** For a screen reader: "63 hertz", "12.5 kilohertz". */
export function sayFrequency(frequencyHz: number): string {
  const [text, kilo] = toFrequencyText(frequencyHz);
  return `${text} ${kilo ? "kilohertz" : "hertz"}`;
}

/** Distortion to two figures: "1.4 %", "0.40 %", "12 %". */
export const formatPercent = (percent: number): string => `${formatPercentPlain(percent)}${NBSP}%`;

const LEAST_PERCENT = 0.001;

/** Never a bare zero: what is smaller than can be printed says so. */
export function formatPercentPlain(percent: number): string {
  if (percent >= 9.95) return percent.toFixed(0);
  if (percent >= 0.995) return percent.toFixed(1);
  if (percent >= 0.00995) return percent.toFixed(2);
  return percent >= LEAST_PERCENT ? percent.toFixed(3) : `under ${LEAST_PERCENT}`;
}

/** In a tight map cell: ".40", "1.3", "14". */
export const formatPercentCell = (percent: number): string =>
  formatPercentPlain(percent).replace(/^0\./, ".");

/** A criterion's percentage as written by a lab: "3 %", "0.5 %". */
export const formatCriterionPercent = (percent: number): string =>
  `${formatPlain(percent)}${NBSP}%`;

/** Grouped by thin spaces: "1 214". */
export const formatCount = (count: number): string =>
  String(Math.round(count)).replace(/\B(?=(\d{3})+$)/g, THIN);

/** Bytes as a file list shows them: "2.2 MB", "312 kB". */
export function formatBytes(bytes: number): string {
  if (bytes < 1000) return `${bytes}${NBSP}B`;
  if (bytes < 999_500) return `${(bytes / 1000).toFixed(0)}${NBSP}kB`;
  if (bytes < 999_950_000) return `${(bytes / 1e6).toFixed(1)}${NBSP}MB`;
  return `${(bytes / 1e9).toFixed(2)}${NBSP}GB`;
}

/** A time in which something is used up, rounded down: "5 h 2 min", "43 min". */
export function formatDurationDown(seconds: number): string {
  const minutes = Math.floor(seconds / 60 + NOISE);
  const hours = Math.floor(minutes / 60);
  if (hours === 0) return `${minutes}${NBSP}min`;
  const rest = minutes % 60;
  return rest === 0 ? `${hours}${NBSP}h` : `${hours}${NBSP}h ${rest}${NBSP}min`;
}

/** A list in words: "63 Hz", "63 Hz and 80 Hz", "40, 50 and 63 Hz" is up to the caller. */
export function formatList(items: readonly string[]): string {
  if (items.length < 2) return items[0] ?? "";
  return `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;
}
