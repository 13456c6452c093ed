import { EMBER, INK, LEVEL, PAPER, WATER_DEEP, WATER_EDGE, WATER_PALE } from '../palette.ts';
import type { MarkStyle } from '../scene.ts';
import type { Ink } from './ink.ts';
import type { Panel } from './panel.ts';

/*
 * What is drawn inside a panel: every function takes values of the panel's axes and gives ink in px. Nothing is clipped, so a domain
 * must hold what is drawn in it.
 */

export interface LineLook {
  readonly color?: string;
  readonly width?: number;
  readonly dash?: readonly [number, number];
}

interface At {
  readonly x: number;
  readonly y: number;
}

interface Between {
  readonly x: number;
  readonly low: number;
  readonly high: number;
}

/** A line from place to place. */
export function line(panel: Panel, places: readonly At[], look: LineLook = {}): Ink {
  const path = places.map(({ x, y }) => ({ x: panel.x(x), y: panel.y(y) }));
  return path.length < 2 ? {} : { polylines: [{ ...lineLook(look), path }] };
}

/** Steps: each value holds from its place to the next one, the last one to `end` (a survival curve, a limit per point). */
export function steps(panel: Panel, places: readonly At[], end: number, look: LineLook = {}): Ink {
  return line(panel, stepped(places, end), look);
}

/** A band between two edges; with `end`, its edges are steps as those of `steps`. Water by default. */
export function band(
  panel: Panel,
  places: readonly Between[],
  look: { readonly color?: string; readonly opacity?: number; readonly end?: number; readonly edge?: string } = {},
): Ink {
  const { color = WATER_PALE, opacity = 1, end, edge } = look;
  const lows = places.map(({ x, low }) => ({ x, y: low }));
  const highs = places.map(({ x, high }) => ({ x, y: high }));
  const below = end === undefined ? lows : stepped(lows, end);
  const above = end === undefined ? highs : stepped(highs, end);
  if (below.length < 2) return {};
  const edges = edge === undefined ? [] : [below, above].map((one) => line(panel, one, { color: edge, width: 1.8 }));
  return {
    areas: [
      {
        color,
        opacity,
        edge: below.map((place, i) => ({
          x: panel.x(place.x),
          y: panel.y(above[i]?.y ?? place.y),
          y2: panel.y(place.y),
        })),
      },
    ],
    polylines: edges.flatMap((one) => one.polylines ?? []),
  };
}

/** Upright bars from `base` (the foot of the panel by default), `gap` px apart. */
export function bars(
  panel: Panel,
  rows: readonly { readonly x: number; readonly x2: number; readonly y: number; readonly color?: string }[],
  look: { readonly color?: string; readonly base?: number; readonly gap?: number } = {},
): Ink {
  const { color = WATER_DEEP, base, gap = 2 } = look;
  const foot = base === undefined ? panel.frame.bottom : panel.y(base);
  return {
    slabs: rows.map((row) => {
      const wide = panel.x(row.x2) - panel.x(row.x);
      const inset = Math.min(gap / 2, wide / 4);
      return {
        x: panel.x(row.x) + inset,
        x2: panel.x(row.x2) - inset,
        y: Math.min(panel.y(row.y), foot),
        y2: Math.max(panel.y(row.y), foot),
        color: row.color ?? color,
      };
    }),
  };
}

/** Upright ranges with a short foot at each end. */
export function ranges(panel: Panel, rows: readonly Between[], look: LineLook & { readonly foot?: number } = {}): Ink {
  const { foot = 6, ...rest } = look;
  const style = { ...lineLook({ width: 2.4, ...rest }) };
  return {
    over: rows.flatMap(({ x, low, high }) => {
      const at = panel.x(x);
      const [y, y2] = [panel.y(high), panel.y(low)];
      return [
        { x: at, y, x2: at, y2, ...style },
        ...[y, y2].map((end) => ({ x: at - foot, y: end, x2: at + foot, y2: end, ...style })),
      ];
    }),
  };
}

/** Ranges lying along x, at a height: for lists of estimates one below the other. */
export function lyingRanges(
  panel: Panel,
  rows: readonly { readonly y: number; readonly low: number; readonly high: number; readonly color?: string }[],
  look: LineLook & { readonly foot?: number } = {},
): Ink {
  const { foot = 6, ...rest } = look;
  return {
    over: rows.flatMap(({ y, low, high, color }) => {
      const style = lineLook({ width: 3, ...rest, ...(color ? { color } : {}) });
      const at = panel.y(y);
      const [x, x2] = [panel.x(low), panel.x(high)];
      return [
        { x, y: at, x2, y2: at, ...style },
        ...[x, x2].map((end) => ({ x: end, y: at - foot, x2: end, y2: at + foot, ...style })),
      ];
    }),
  };
}

/** A full dot, as points that are judged have it. */
export const DOT: MarkStyle = { shape: 'circle', area: 78, fill: INK, stroke: INK, strokeWidth: 0 };
/** A hollow dot, as points that the usual level was set from have it. */
export const RING: MarkStyle = { shape: 'circle', area: 62, fill: PAPER, stroke: INK, strokeWidth: 2 };
/** What stands out. */
export const STANDOUT: MarkStyle = { shape: 'diamond', area: 190, fill: EMBER, stroke: PAPER, strokeWidth: 1 };

/** Dots, each with its own look when it has one. */
export function dots(
  panel: Panel,
  places: readonly (At & { readonly look?: MarkStyle })[],
  look: MarkStyle = DOT,
): Ink {
  return { marks: places.map((place) => ({ ...(place.look ?? look), x: panel.x(place.x), y: panel.y(place.y) })) };
}

/** A ground over a stretch of x, over the panel's whole height. */
export function ground(panel: Panel, from: number, to: number, color: string): Ink {
  const { top, bottom } = panel.frame;
  return { slabs: [{ x: panel.x(from), x2: panel.x(to), y: top, y2: bottom, color }] };
}

/** A level across the panel, or over a stretch of it. */
export function level(
  panel: Panel,
  y: number,
  look: LineLook & { readonly from?: number; readonly to?: number } = {},
): Ink {
  const { from, to, ...rest } = look;
  const [low, high] = panel.frame.xDomain;
  const at = panel.y(y);
  return {
    over: [
      {
        x: panel.x(from ?? low),
        y: at,
        x2: panel.x(to ?? high),
        y2: at,
        ...lineLook({ color: LEVEL, width: 2.4, ...rest }),
      },
    ],
  };
}

/** An upright line over the panel's whole height. */
export function upright(panel: Panel, x: number, look: LineLook & { readonly top?: number } = {}): Ink {
  const { top = panel.frame.top, ...rest } = look;
  const at = panel.x(x);
  return { over: [{ x: at, y: top, x2: at, y2: panel.frame.bottom, ...lineLook({ color: EMBER, ...rest }) }] };
}

function lineLook({ color = WATER_EDGE, width = 2.2, dash }: LineLook): {
  color: string;
  width: number;
  dash?: readonly [number, number];
} {
  return { color, width, ...(dash ? { dash } : {}) };
}

function stepped(places: readonly At[], end: number): At[] {
  return places.flatMap((place, i) => [place, { x: places[i + 1]?.x ?? end, y: place.y }]);
}
