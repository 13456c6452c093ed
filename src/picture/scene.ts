import type { FontWeight } from './fonts.ts';
import { textWidth } from './textWidth.ts';

/*
 * A scene: everything in the drawing, placed. Texts, strokes, slabs and marks are in px of the drawing (origin top left); what is
 * measured (band, levels, points) is in chart coordinates and goes through the two scales.
 */

export interface PlacedText {
  readonly text: string;
  readonly x: number;
  /** baseline of the line */
  readonly y: number;
  readonly size: number;
  readonly weight: FontWeight;
  readonly color: string;
  readonly align: 'left' | 'center' | 'right';
  /** what the text is, for tests and for reading a snapshot: 'title', 'limit', 'date', … */
  readonly role: string;
}

export interface Stroke {
  readonly x: number;
  readonly y: number;
  readonly x2: number;
  readonly y2: number;
  readonly color: string;
  readonly width: number;
  readonly dash?: readonly [number, number];
}

export interface Slab {
  readonly x: number;
  readonly y: number;
  readonly x2: number;
  readonly y2: number;
  readonly color: string;
}

/** A symbol Vega knows, or an SVG path in its unit square. */
export type Shape = 'circle' | 'diamond' | 'triangle-up' | `M${string}`;

/** How a mark looks; `area` in square px, as Vega measures symbols. */
export interface MarkStyle {
  readonly shape: Shape;
  readonly area: number;
  readonly fill: string;
  readonly stroke: string;
  readonly strokeWidth: number;
}

export interface PlacedMark extends MarkStyle {
  readonly x: number;
  readonly y: number;
}

/** A horizontal level over a stretch of points, in chart coordinates. */
export interface LevelLine {
  readonly x: number;
  readonly x2: number;
  readonly value: number;
  readonly color: string;
  readonly width: number;
  readonly dash: readonly number[];
}

/** A filled shape between two edges, in px of the drawing. */
export interface Area {
  readonly color: string;
  readonly opacity?: number;
  readonly edge: readonly { readonly x: number; readonly y: number; readonly y2: number }[];
}

/** A line through several places, in px of the drawing, drawn in the order given. */
export interface Polyline {
  readonly color: string;
  readonly width: number;
  readonly dash?: readonly [number, number];
  readonly path: readonly { readonly x: number; readonly y: number }[];
}

export interface Frame {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
  readonly xDomain: readonly [number, number];
  readonly yDomain: readonly [number, number];
}

export interface Scene {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly frame: Frame;
  readonly slabs: readonly Slab[];
  /** tints over the band and under the lines */
  readonly veils: readonly Slab[];
  /** bands that are not the chart's own: over the slabs, under everything else */
  readonly areas?: readonly Area[];
  /** curves and steps that are not the chart's own: under the strokes of `over` and all marks */
  readonly polylines?: readonly Polyline[];
  readonly under: readonly Stroke[];
  /** limits and centre line per point, as steps: two rows where a step begins and ends */
  readonly band: readonly {
    readonly x: number;
    readonly lower: number;
    readonly center: number;
    readonly upper: number;
  }[];
  readonly levels: readonly LevelLine[];
  readonly points: readonly (MarkStyle & {
    readonly x: number;
    readonly value: number;
  })[];
  readonly line: { readonly width: number; readonly opacity: number };
  readonly over: readonly Stroke[];
  readonly marks: readonly PlacedMark[];
  readonly texts: readonly PlacedText[];
}

/** A drawing with nothing on it. */
export const EMPTY_SCENE: Scene = {
  widthPx: 8,
  heightPx: 8,
  frame: { left: 0, right: 8, top: 0, bottom: 8, xDomain: [0, 1], yDomain: [0, 1] },
  slabs: [],
  veils: [],
  under: [],
  band: [],
  levels: [],
  points: [],
  line: { width: 1, opacity: 1 },
  over: [],
  marks: [],
  texts: [],
};

export interface Box {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

/** The box a text covers, from the font's own widths; top and bottom hold capitals and descenders. */
export function boxOf(text: PlacedText): Box {
  const width = textWidth(text.text, text.size, text.weight);
  const left = text.align === 'left' ? text.x : text.align === 'right' ? text.x - width : text.x - width / 2;
  return {
    left,
    right: left + width,
    top: text.y - 0.74 * text.size,
    bottom: text.y + 0.24 * text.size,
  };
}

export function overlap(a: Box, b: Box): boolean {
  return a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;
}

/** Where a point number lies, in px. */
export function xAt(frame: Pick<Frame, 'left' | 'right' | 'xDomain'>, x: number): number {
  const [low, high] = frame.xDomain;
  return frame.left + ((x - low) / (high - low)) * (frame.right - frame.left);
}

/** Where a rate lies, in px. */
export function yAt(frame: Pick<Frame, 'top' | 'bottom' | 'yDomain'>, value: number): number {
  const [low, high] = frame.yDomain;
  return frame.bottom - ((value - low) / (high - low)) * (frame.bottom - frame.top);
}
