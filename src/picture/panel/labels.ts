import { INK, TEXT_SIZE } from '../palette.ts';
import { type Box, boxOf, overlap, type PlacedText } from '../scene.ts';
import { drawable, textWidth } from '../textWidth.ts';
import { wrapText } from '../wrapText.ts';
import { type Ink, placed } from './ink.ts';
import type { Panel } from './panel.ts';

/** Words at the right end of a line. */
export interface EndWords {
  readonly y: number;
  readonly lines: readonly string[];
  readonly color?: string;
  /** the last line, or all of them, in bold */
  readonly bold?: 'last' | 'all';
}

const ROW = 23;
const GAP = 9;
const REACH = 24;

/** Room that end labels need right of the plot, for a panel's `rightRoom`. */
export function endLabelsRoom(labels: readonly EndWords[]): number {
  if (labels.length === 0) return 0;
  return (
    REACH + Math.max(...labels.flatMap(({ lines }) => lines.map((text) => textWidth(drawable(text), TEXT_SIZE, 700))))
  );
}

/**
 * Labels right of the panel at the height of what they name, pushed apart as little as needed so that none touches another, with a
 * thin line back.
 */
export function endLabels(panel: Panel, labels: readonly EndWords[]): Ink {
  const sorted = labels.map((label) => ({ ...label, at: panel.y(label.y) })).sort((a, b) => a.at - b.at);
  const tops = spaced(
    sorted.map(({ at, lines }) => ({ middle: at, height: lines.length * ROW })),
    panel.frame.top - 10,
    panel.frame.bottom + 14,
  );
  const { right } = panel.frame;
  return {
    over: sorted.map(({ at, lines, color = INK }, i) => ({
      x: right + 1,
      y: at,
      x2: right + REACH - 5,
      y2: (tops[i] ?? 0) + (lines.length * ROW) / 2,
      color,
      width: 1.6,
    })),
    texts: sorted.flatMap(({ lines, color = INK, bold = 'last' }, i) =>
      lines.map((text, row) =>
        placed(text, right + REACH, (tops[i] ?? 0) + row * ROW + 17, {
          color,
          weight: bold === 'all' || row === lines.length - 1 ? 700 : 400,
          role: 'end label',
        }),
      ),
    ),
  };
}

/** Tops of boxes wanted around their middles, in order, none touching: down from the top, then back up from the bottom. */
export function spaced(
  boxes: readonly { readonly middle: number; readonly height: number }[],
  top: number,
  bottom: number,
): number[] {
  const tops = boxes.map(({ middle, height }) => middle - height / 2);
  for (let i = 0; i < tops.length; i++) {
    const floor = i === 0 ? top : (tops[i - 1] ?? 0) + (boxes[i - 1]?.height ?? 0) + GAP;
    tops[i] = Math.max(tops[i] ?? 0, floor);
  }
  for (let i = tops.length - 1; i >= 0; i--) {
    const ceiling = (i === tops.length - 1 ? bottom : (tops[i + 1] ?? 0) - GAP) - (boxes[i]?.height ?? 0);
    tops[i] = Math.min(tops[i] ?? 0, ceiling);
  }
  return tops;
}

const SIDES = ['above', 'above right', 'above left', 'right', 'left', 'below', 'below right', 'below left'] as const;
type Side = (typeof SIDES)[number];

/** Words wanted at a place in the plot. */
export interface Callout {
  readonly x: number;
  readonly y: number;
  readonly words: string;
  readonly color?: string;
  readonly bold?: boolean;
  /** the sides tried, in this order; all by default, above first */
  readonly sides?: readonly Side[];
  /** px between the place and the words */
  readonly away?: number;
  /** px after which the words are broken into lines */
  readonly most?: number;
}

/**
 * Words beside places, each on the first side where it touches no other text and stays inside the panel; words that find no room are
 * left out, so say what matters in a note as well. Earlier callouts go first.
 * @param taken what is already drawn nearby and must stay clear: texts, boxes, ink
 */
export function callouts(
  panel: Panel,
  wanted: readonly Callout[],
  taken: readonly (PlacedText | Box | Ink)[] = [],
): Ink {
  const boxes = taken.flatMap((one) => ('text' in one ? [boxOf(one)] : 'left' in one ? [one] : boxesOf(one)));
  const texts: PlacedText[] = [];
  for (const one of wanted) {
    const { away = 12, sides = SIDES } = one;
    const found = [away, away * 2, away * 3]
      .flatMap((far) => sides.map((side) => calloutTexts(panel, one, side, far)))
      .find((lines) => {
        const own = lines.map(boxOf);
        return own.every((box) => inside(box, panel) && !boxes.some((other) => overlap(box, other)));
      });
    if (!found) continue;
    texts.push(...found);
    boxes.push(...found.map(boxOf).map((box) => ({ ...box, left: box.left - 8, right: box.right + 8 })));
  }
  return { texts };
}

/** Boxes around texts and marks, and along lines; slabs and areas may have words on them. */
function boxesOf(drawn: Ink): Box[] {
  const along = (x: number, y: number, x2: number, y2: number): Box[] => {
    const parts = Math.max(1, Math.ceil(Math.hypot(x2 - x, y2 - y) / 12));
    return Array.from({ length: parts + 1 }, (_, i) => {
      const [at, up] = [x + ((x2 - x) * i) / parts, y + ((y2 - y) * i) / parts];
      return { left: at - 3, right: at + 3, top: up - 3, bottom: up + 3 };
    });
  };
  return [
    ...(drawn.texts ?? []).map(boxOf),
    ...(drawn.marks ?? []).map(({ x, y, area }) => {
      const half = Math.sqrt(area) / 2;
      return { left: x - half, right: x + half, top: y - half, bottom: y + half };
    }),
    ...(drawn.over ?? []).flatMap(({ x, y, x2, y2 }) => along(x, y, x2, y2)),
    ...(drawn.polylines ?? []).flatMap(({ path }) =>
      path.slice(1).flatMap((to, i) => along(path[i]?.x ?? to.x, path[i]?.y ?? to.y, to.x, to.y)),
    ),
  ];
}

function inside(box: Box, panel: Panel): boolean {
  const { left, right, top, bottom } = panel.frame;
  return box.left >= left && box.right <= right && box.top >= top - 2 && box.bottom <= bottom;
}

function calloutTexts(panel: Panel, one: Callout, side: Side, away: number): PlacedText[] {
  const { bold = false, color = INK, most = 260 } = one;
  const weight = bold ? 700 : 400;
  const lines = wrapText(drawable(one.words), most, TEXT_SIZE, weight);
  const width = Math.max(...lines.map((text) => textWidth(text, TEXT_SIZE, weight)));
  const { left, right } = panel.frame;
  const [x, y] = [panel.x(one.x), panel.y(one.y)];
  const first = side.startsWith('above')
    ? y - away - 5 - (lines.length - 1) * ROW
    : side.startsWith('below')
      ? y + away + 15
      : y + 7 - ((lines.length - 1) * ROW) / 2;
  const aside = side === 'left' || side === 'right' ? away : 4;
  const [at, align] = side.endsWith('left')
    ? ([x - aside, 'right'] as const)
    : side.endsWith('right')
      ? ([x + aside, 'left'] as const)
      : ([Math.min(Math.max(x, left + width / 2 + 4), right - width / 2 - 4), 'center'] as const);
  return lines.map((text, row) => placed(text, at, first + row * ROW, { color, weight, align, role: 'callout' }));
}
