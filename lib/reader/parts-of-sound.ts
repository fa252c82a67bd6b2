/** What gives out, from low to high: the bands of a publication gathered into five parts of the sound. */
import { formatFrequency, formatLevel, formatLimitDown, formatList, NBSP } from "../charts/format";
import type { Snapshot } from "../publication/snapshot-schema";

type Band = Snapshot["bands"][number];

export const PARTS_OF_SOUND = [
  { name: "Bass", fromHz: 40, toHz: 80 },
  { name: "Upper bass", fromHz: 100, toHz: 250 },
  { name: "Middle", fromHz: 315, toHz: 1250 },
  { name: "Upper middle", fromHz: 1600, toHz: 5000 },
  { name: "Treble", fromHz: 6300, toHz: 16_000 },
] as const;

export interface PartOfSound {
  name: string;
  /** "40 to 80 Hz". */
  range: string;
  /** Lowest limit in the part, SPL at 1 m; null where none was assessed or it lies below the lowest run. */
  reachedDb: number | null;
  atLeast: boolean;
  /** Cause of the band that gives out first. */
  cause: Band["cause"] | null;
  causeHz: number | null;
  /** Whether some band was past its limit from the start. */
  belowLowest: boolean;
  words: string;
}

/** @returns the parts that hold a band, low to high. */
export function toPartsOfSound(snapshot: Pick<Snapshot, "bands" | "measured">): PartOfSound[] {
  const highest = Math.max(...snapshot.measured.levels_dB);
  const lowest = Math.min(...snapshot.measured.levels_dB);
  return PARTS_OF_SOUND.flatMap(({ name, fromHz, toHz }) => {
    const bands = snapshot.bands.filter((b) => b.nominal_Hz >= fromHz && b.nominal_Hz <= toHz);
    const [first, last] = [bands[0], bands.at(-1)];
    if (first === undefined || last === undefined) return [];
    const weakest = findLowest(bands, (band) => band.limit.spl_dB);
    const giving = findLowest(bands.filter(isFound), (band) => band.limit.nominal_dB);
    const below = bands.filter((band) => band.limit.status === "below lowest");
    const held = below[0] ?? giving;
    return [
      {
        name,
        range: toRange(first.nominal_Hz, last.nominal_Hz),
        reachedDb: below.length > 0 ? null : (weakest?.limit.spl_dB ?? null),
        atLeast: weakest?.limit.status === "not reached",
        cause: held?.cause ?? null,
        causeHz: held?.nominal_Hz ?? null,
        belowLowest: below.length > 0,
        words: toWords(bands, below, { highest, lowest }),
      },
    ];
  });
}

const isFound = (band: Band): boolean => band.limit.status === "found";

function findLowest(bands: readonly Band[], of: (band: Band) => number | null): Band | null {
  let low: Band | null = null;
  for (const band of bands) {
    const value = of(band);
    if (value !== null && value < (low === null ? Infinity : (of(low) ?? Infinity))) low = band;
  }
  return low;
}

/** "40 to 80 Hz", "315 Hz to 1.25 kHz". */
export const toRange = (fromHz: number, toHz: number): string =>
  fromHz < 1000 === toHz < 1000
    ? `${formatFrequency(fromHz).split(NBSP)[0] ?? ""} to ${formatFrequency(toHz)}`
    : `${formatFrequency(fromHz)} to ${formatFrequency(toHz)}`;

/** What each cause did, as readers say it. */
const CAUSE_SENTENCES: Record<Band["cause"], string> = {
  limiter: "a limiter stops the rise",
  compressor: "a compressor takes level away",
  equaliser: "the electronics turn this part down",
  overload: "it is overloaded: distortion grows faster than the level",
  port: "the port gives way",
  thermal: "heat in the drive unit takes level away",
  none: "the limit comes without a single cause",
  unresolved: "the cause is not settled",
  "distortion only": "distortion passes the limit while the level still rises",
};

const SHOWN_LOSS_DB = 0.5;

function toWords(
  bands: readonly Band[],
  below: readonly Band[],
  levels: { highest: number; lowest: number },
): string {
  const sentences: string[] = [];
  if (below.length > 0) {
    sentences.push(
      `${toBandWords(below)} it was past its limit already at the ${formatLevel(levels.lowest)} run.`,
    );
  }
  const found = bands.filter(isFound);
  for (const cause of new Set(found.map((band) => band.cause))) {
    const held = found.filter((band) => band.cause === cause);
    const lost = largestLoss(held);
    sentences.push(
      `${toBandWords(held)} ${CAUSE_SENTENCES[cause]}${
        lost === null ? "" : `: up to ${formatLoss(lost)} under the expected level`
      }.`,
    );
  }
  const open = bands.filter((band) => band.limit.status === "not reached");
  if (open.length === bands.length) {
    const lost = largestLoss(open);
    sentences.push(
      `Stayed under the limit up to the ${formatLevel(levels.highest)} run${
        lost === null ? "" : `, with up to ${formatLoss(lost)} compression`
      }.`,
    );
  } else if (open.length > 0) {
    sentences.push(`The other bands stayed under it up to the ${formatLevel(levels.highest)} run.`);
  }
  const missing = bands.filter((band) => band.limit.status === "not assessed");
  if (missing.length > 0) sentences.push(`${toBandWords(missing)} it could not be assessed.`);
  const heat = toLongTermWords(bands);
  return [...sentences, ...(heat === null ? [] : [heat])].join(" ");
}

const toBandWords = (bands: readonly Band[]): string =>
  `At ${formatList(bands.map((band) => formatFrequency(band.nominal_Hz)))}`;

const formatLoss = (lossDb: number): string => `${lossDb.toFixed(1)}${NBSP}dB`;

function largestLoss(bands: readonly Band[]): number | null {
  const losses = bands.flatMap((band) =>
    band.levels.flatMap((run) => (run.kind === "short-term" ? (run.compression_dB ?? []) : [])),
  );
  const largest = Math.max(...losses);
  return losses.length > 0 && largest >= SHOWN_LOSS_DB ? largest : null;
}

function toLongTermWords(bands: readonly Band[]): string | null {
  const runs = bands.flatMap((band) => band.long_term).filter((run) => run.total_dB !== null);
  const worst = runs.reduce<(typeof runs)[number] | null>(
    (top, run) => (top === null || (run.total_dB ?? 0) > (top.total_dB ?? 0) ? run : top),
    null,
  );
  if (worst === null || worst.total_dB === null || worst.total_dB < SHOWN_LOSS_DB) return null;
  const more = worst.lower_bound ? " or more" : "";
  return `After conditioning the loss is ${formatLoss(worst.total_dB)}${more}.`;
}

/** "at least 101 dB", "93 dB", "past it from the start", "not assessed". */
export function toReachedWords(part: PartOfSound): string {
  if (part.belowLowest) return "past it from the start";
  if (part.reachedDb === null) return "not assessed";
  return `${part.atLeast ? "at least " : ""}${formatLimitDown(part.reachedDb)}`;
}
