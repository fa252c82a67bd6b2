/** How a check is written down, and the figures in its sentences. */
import type { ArrivalCheck, CheckCode } from "../arrival-schema";

/** The keys that most checks leave empty. */
export const plainCheck = {
  spoils: "",
  remedy: "",
  figure: null,
  where: null,
  bands_Hz: [],
} as const satisfies Partial<ArrivalCheck>;

type Words = Pick<ArrivalCheck, "title" | "finding"> & Partial<ArrivalCheck>;

export const passed = (code: CheckCode, words: Words): ArrivalCheck => ({
  ...plainCheck,
  ...words,
  code,
  verdict: "pass",
});

/** What speaks says what it spoils and what to do. */
export const speaking = (
  code: CheckCode,
  verdict: "warn" | "fail",
  words: Words & Pick<ArrivalCheck, "spoils" | "remedy">,
): ArrivalCheck => ({ ...plainCheck, ...words, code, verdict });

/** After a fault of the input gain: both ways keep the calibration. */
export const GAIN_REMEDY =
  "If it was an accident, a door or a bump, record this run again at the same gain. If the gain is too high, lower it, record the calibrator again and repeat every level.";

export const AGAIN_REMEDY =
  "Record this run again at the same gain while the loudspeaker still stands there.";

/** "1 214", "48 000". */
export const sayCount = (count: number): string =>
  Math.round(count).toLocaleString("en").replaceAll(",", " ");

/** "over" and "under" a plan. */
export const sayMore = (differenceDb: number, more: string, less: string): string =>
  differenceDb > 0 ? more : less;
