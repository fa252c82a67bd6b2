/**
 * The picture of a recording: lowest and highest sample per column, and the place that a check
 * speaks of. Below it the frequency of the sweep where one was found, else the time.
 */
import { round2, type Figure, type Shape } from "./figure";
import { formatFrequency, formatFrequencyShort, formatPlain, NBSP } from "./format";
import { COLOURS, levelRamp, type LevelPaint } from "./tokens";

export interface Envelope {
  from_s: number;
  to_s: number;
  /** [columns] full scale is 1. */
  low: readonly number[];
  high: readonly number[];
  from_Hz: number | null;
  to_Hz: number | null;
}

export interface EnvelopePlace {
  from_s: number;
  to_s: number;
  /** The recording has nothing here: hatched, and said so. */
  missing: boolean;
}

interface EnvelopeInput {
  envelope: Envelope;
  place: EnvelopePlace | null;
  paint?: LevelPaint;
  width?: number;
}

const HEIGHT = 56;
const AXIS = 18;
/** The loudest sample reaches this far from the middle, px; quiet recordings are drawn larger. */
const REACH = 25;
const HATCH_PITCH = 8;
const NARROWEST = 3;

export function toEnvelopeFigure({ envelope, place, paint, width = 560 }: EnvelopeInput): Figure {
  const { from_s, to_s } = envelope;
  const toX = (s: number): number =>
    to_s > from_s ? Math.min(width, Math.max(0, ((s - from_s) / (to_s - from_s)) * width)) : 0;
  const shapes: Shape[] = [
    { kind: "rect", role: "ground", x: 0, y: 0, width, height: HEIGHT, fill: COLOURS.sheet },
  ];
  const wave = toWave(envelope, width);
  if (wave !== "") {
    const fill = paint?.line ?? levelRamp(4)[1]?.line ?? COLOURS.edge;
    shapes.push({ kind: "path", role: "wave", d: wave, fill, opacity: 0.75 });
  }
  if (place !== null)
    shapes.push(...toPlaceShapes(toX(place.from_s), toX(place.to_s), place.missing));
  shapes.push({
    kind: "line",
    role: "axis",
    x1: 0,
    y1: HEIGHT,
    x2: width,
    y2: HEIGHT,
    stroke: COLOURS.ink,
    crisp: true,
  });
  for (const tick of toTicks(envelope, width)) {
    shapes.push({
      kind: "text",
      role: "tick",
      x: round2(tick.x),
      y: HEIGHT + 14,
      text: tick.text,
      size: 11,
      fill: COLOURS.ink2,
      anchor: tick.x < 14 ? "start" : tick.x > width - 30 ? "end" : "middle",
    });
  }
  return { width, height: HEIGHT + AXIS, patterns: [], shapes };
}

/** One closed outline: along the highest samples, back along the lowest. */
function toWave({ low, high }: Envelope, width: number): string {
  const columns = Math.min(low.length, high.length);
  if (columns === 0) return "";
  let peak = 0;
  for (let at = 0; at < columns; at += 1) {
    peak = Math.max(peak, Math.abs(low[at] ?? 0), Math.abs(high[at] ?? 0));
  }
  const scale = peak > 0 ? REACH / peak : 0;
  const x = (at: number): number => round2(columns === 1 ? 0 : (at / (columns - 1)) * width);
  const y = (value: number | undefined): number => round2(HEIGHT / 2 - (value ?? 0) * scale);
  const there = Array.from({ length: columns }, (_, at) => `${x(at)} ${y(high[at])}`);
  const back = Array.from({ length: columns }, (_, at) => {
    const from = columns - 1 - at;
    // Silence keeps a hair, so that it is seen as silence and not as nothing.
    return `${x(from)} ${Math.max(y(low[from]), y(high[from]) + 0.8)}`;
  });
  return `M${there.join("L")}L${back.join("L")}Z`;
}

function toPlaceShapes(from: number, to: number, missing: boolean): Shape[] {
  const width = Math.max(NARROWEST, to - from);
  if (!missing) {
    return [
      {
        kind: "rect",
        role: "place",
        x: round2(from),
        y: 0,
        width: round2(width),
        height: HEIGHT,
        fill: COLOURS.fault,
        opacity: 0.16,
      },
      {
        kind: "path",
        role: "place-edges",
        d: `M${round2(from)} 0V${HEIGHT}M${round2(from + width)} 0V${HEIGHT}`,
        stroke: COLOURS.fault,
        strokeWidth: 1.5,
      },
    ];
  }
  const shapes: Shape[] = [
    {
      kind: "rect",
      role: "nothing",
      x: round2(from),
      y: 0,
      width: round2(width),
      height: HEIGHT,
      fill: COLOURS.sheet,
    },
    {
      kind: "path",
      role: "nothing-hatch",
      d: toHatch(from, from + width),
      stroke: COLOURS.noiseLine,
      strokeWidth: 1.1,
    },
    {
      kind: "path",
      role: "place-edges",
      d: `M${round2(from)} 0V${HEIGHT}`,
      stroke: COLOURS.fault,
      strokeWidth: 1.5,
    },
  ];
  if (width >= 96) {
    shapes.push({
      kind: "text",
      role: "nothing-words",
      x: round2(from + width / 2),
      y: HEIGHT / 2 + 4,
      text: "nothing here",
      size: 11,
      fill: COLOURS.fault,
      halo: COLOURS.sheet,
      anchor: "middle",
    });
  }
  return shapes;
}

/** Lines at 45°, cut off at the edges of the place. */
function toHatch(from: number, to: number): string {
  const parts: string[] = [];
  for (let x = from - HEIGHT; x < to; x += HATCH_PITCH) {
    const left = Math.max(x, from);
    const right = Math.min(x + HEIGHT, to);
    if (right <= left) continue;
    parts.push(
      `M${round2(left)} ${round2(HEIGHT - (left - x))}L${round2(right)} ${round2(HEIGHT - (right - x))}`,
    );
  }
  return parts.join("");
}

interface Tick {
  x: number;
  text: string;
}

const TICKS_HZ = [63, 200, 630, 2000, 6300] as const;
const ROOM = 34;

/** Frequencies of an exponential sweep lie evenly in lg f along the time. */
function toTicks({ from_s, to_s, from_Hz, to_Hz }: Envelope, width: number): Tick[] {
  if (from_Hz !== null && to_Hz !== null && from_Hz > 0 && to_Hz > from_Hz) {
    const span = Math.log(to_Hz / from_Hz);
    const inner = TICKS_HZ.map((hz) => ({
      x: (Math.log(hz / from_Hz) / span) * width,
      text: formatFrequencyShort(hz),
    })).filter((tick) => tick.x > ROOM + 10 && tick.x < width - ROOM - 14);
    return [
      { x: 0, text: formatFrequency(from_Hz) },
      ...inner,
      { x: width, text: formatFrequency(to_Hz) },
    ];
  }
  return [
    { x: 0, text: `${formatPlain(from_s)}${NBSP}s` },
    { x: width / 2, text: `${formatPlain((from_s + to_s) / 2)}${NBSP}s` },
    { x: width, text: `${formatPlain(to_s)}${NBSP}s` },
  ];
}
