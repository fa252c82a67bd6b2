/**
 * A figure as plain shapes: what the geometry code gives to screen, picture and page alike.
 * Lengths are CSS px, y grows downwards; colours come in both themes and the drawer picks.
 */
import type { Paint } from "./tokens";

/** A pattern's name, declared in the figure's `patterns`. */
export interface PatternFill {
  readonly pattern: string;
}
export type Fill = Paint | PatternFill;

interface Stroked {
  readonly stroke?: Paint;
  readonly strokeWidth?: number;
  /** Lengths of dashes and gaps. */
  readonly dash?: readonly number[];
}

interface Named {
  /** What the shape is, for tests and for styling: "fill", "limit", "onset". */
  readonly role?: string;
}

export interface RectShape extends Stroked, Named {
  readonly kind: "rect";
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
  readonly fill?: Fill;
  readonly opacity?: number;
  /** No anti-aliasing: blocks that must meet exactly. */
  readonly crisp?: boolean;
}

export interface LineShape extends Stroked, Named {
  readonly kind: "line";
  readonly x1: number;
  readonly y1: number;
  readonly x2: number;
  readonly y2: number;
  readonly crisp?: boolean;
}

export interface PathShape extends Stroked, Named {
  readonly kind: "path";
  readonly d: string;
  readonly fill?: Fill;
  readonly opacity?: number;
}

export interface CircleShape extends Stroked, Named {
  readonly kind: "circle";
  readonly cx: number;
  readonly cy: number;
  readonly r: number;
  readonly fill?: Fill;
}

export interface TextShape extends Named {
  readonly kind: "text";
  readonly x: number;
  /** Base line. */
  readonly y: number;
  readonly text: string;
  readonly size: number;
  readonly fill: Paint;
  readonly anchor?: "start" | "middle" | "end";
  readonly weight?: 400 | 500 | 600 | 700;
  readonly family?: "figures" | "prose";
  /** Letters set closer, px. */
  readonly tighten?: number;
  /** A rim that keeps the text readable over lines. */
  readonly halo?: Paint;
}

export interface GroupShape extends Named {
  readonly kind: "group";
  readonly shapes: readonly Shape[];
  readonly x?: number;
  readonly y?: number;
  readonly scale?: number;
  /** The nominal frequency of the band that the group belongs to. */
  readonly band?: number;
}

export type Shape = RectShape | LineShape | PathShape | CircleShape | TextShape | GroupShape;

/** A tile of parallel lines, turned. */
export interface Pattern {
  readonly name: string;
  readonly pitch: number;
  readonly width: number;
  /** Offset of the line in the tile. */
  readonly offset: number;
  /** Degrees, clockwise; 0 draws upright lines. */
  readonly turn: number;
  readonly line: Paint;
  readonly ground: Paint;
}

export interface Figure {
  readonly width: number;
  readonly height: number;
  readonly patterns: readonly Pattern[];
  readonly shapes: readonly Shape[];
}

/** Every shape of a tree, groups opened. Positions stay as written in their group. */
export function flattenShapes(shapes: readonly Shape[]): Shape[] {
  return shapes.flatMap((s) => (s.kind === "group" ? [s, ...flattenShapes(s.shapes)] : [s]));
}

/** Two decimals are a hundredth of a pixel: enough, and short. */
export const round2 = (value: number): number => Math.round(value * 100) / 100;
