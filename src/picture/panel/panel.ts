import { HAIRLINE, INK, MARGIN, QUIET, TEXT_SIZE, WIDTH } from '../palette.ts';
import { boxOf, type Frame, type PlacedText, type Stroke, xAt, yAt } from '../scene.ts';
import { textWidth } from '../textWidth.ts';
import { wrapText } from '../wrapText.ts';
import { type Ink, placed } from './ink.ts';
import { apart, dateTickChoices, type Figures, niceDomain, niceTicks, type Tick, wordedTicks } from './ticks.ts';

/** One axis of a panel. */
export interface Axis {
  /** the values shown; widened to whole ticks when `nice` */
  readonly domain: readonly [number, number];
  readonly nice?: boolean;
  /** default 'number' */
  readonly figures?: Figures;
  /** own ticks; `[]` for an axis without any */
  readonly ticks?: readonly Tick[];
  /** what is measured, in words: above the y axis at the left, below the x axis at the right */
  readonly title?: string;
}

export interface PanelOptions {
  readonly top: number;
  /** of the plot itself; the words around it come on top */
  readonly height: number;
  /** edges of all that belongs to the panel, words included; the drawing's margins by default */
  readonly left?: number;
  readonly right?: number;
  /** room kept free right of the plot for labels */
  readonly rightRoom?: number;
  readonly x: Axis;
  readonly y: Axis;
}

/** A plot in its place: where values lie, its axes as ink, and where the next thing may begin. */
export interface Panel {
  readonly frame: Frame;
  readonly x: (value: number) => number;
  readonly y: (value: number) => number;
  readonly axes: Ink;
  readonly bottom: number;
}

const ROW = 23;
const TICK_GAP = 14;

/**
 * A panel with its axes: gridlines and figures at the left, figures below, as many as fit without touching.
 * @throws  RangeError when a domain is not finite: what is drawn must have been measured
 */
export function panel(options: PanelOptions): Panel {
  const { left = MARGIN, right = WIDTH - MARGIN, rightRoom = 0, height } = options;
  for (const value of [...options.x.domain, ...options.y.domain])
    if (!Number.isFinite(value)) throw new RangeError(`a panel cannot show ${value}`);
  const yDomain = domainOf(options.y, Math.floor(height / 60));
  const yTicks =
    options.y.ticks ??
    wordedTicks(niceTicks(...yDomain, Math.floor(height / 60), options.y.figures), options.y.figures ?? 'number');
  const yWords = Math.max(0, ...yTicks.flatMap((tick) => tick.lines.map((line) => textWidth(line, TEXT_SIZE, 400))));
  const title = options.y.title;
  // Half the height of the topmost figure stands above the plot.
  const top = options.top + (title ? ROW + 13 : yTicks.length > 0 ? 11 : 0);
  const frame: Frame = {
    left: left + (yTicks.length > 0 ? yWords + 12 : 0),
    right: right - rightRoom,
    top,
    bottom: top + height,
    xDomain: domainOf(options.x, 5),
    yDomain,
  };
  const x = (value: number): number => xAt(frame, value);
  const y = (value: number): number => yAt(frame, value);
  const below = xAxis(options.x, frame, left, right);
  const texts: PlacedText[] = yTicks.map((tick) =>
    placed(tick.lines[0] ?? '', frame.left - 10, y(tick.at) + 7, { color: QUIET, align: 'right', role: 'y figure' }),
  );
  if (title) texts.push(placed(title, left, options.top + 17, { color: INK, role: 'y title' }));
  return {
    frame,
    x,
    y,
    axes: {
      under: yTicks.map((tick) => ({
        x: frame.left,
        y: y(tick.at),
        x2: frame.right,
        y2: y(tick.at),
        color: HAIRLINE,
        width: 1.2,
      })),
      over: below.strokes,
      texts: [...texts, ...below.texts],
    },
    bottom: below.bottom,
  };
}

function domainOf(axis: Axis, wanted: number): readonly [number, number] {
  const [low, high] = axis.domain;
  if (axis.nice) return niceDomain(low, high, wanted, axis.figures);
  return apart(low, high) ? axis.domain : [low - 0.5, low + 0.5];
}

function xAxis(
  axis: Axis,
  frame: Frame,
  left: number,
  right: number,
): { texts: PlacedText[]; strokes: Stroke[]; bottom: number } {
  const labels = fittingTicks(axis, frame, left, right);
  const strokes: Stroke[] = [
    { x: frame.left, y: frame.bottom, x2: frame.right, y2: frame.bottom, color: QUIET, width: 1.6 },
    ...labels.map(({ tick }) => {
      const x = xAt(frame, tick.at);
      return { x, y: frame.bottom, x2: x, y2: frame.bottom + 7, color: QUIET, width: 1.5 };
    }),
  ];
  const texts = labels.flatMap((label) => label.texts);
  let bottom =
    frame.bottom + (labels.length > 0 ? 16 + Math.max(...labels.map(({ tick }) => tick.lines.length)) * ROW : 8);
  if (axis.title) {
    const room = frame.right - left;
    const edge = textWidth(axis.title, TEXT_SIZE, 400) <= room ? frame.right : right;
    for (const line of wrapText(axis.title, right - left, TEXT_SIZE, 400)) {
      bottom += ROW;
      texts.push(placed(line, edge, bottom - 5, { color: INK, align: 'right', role: 'x title' }));
    }
  }
  return { texts, strokes, bottom };
}

/** The closest ticks whose words do not touch; words at the ends are moved in rather than cut. */
function fittingTicks(axis: Axis, frame: Frame, left: number, right: number): { tick: Tick; texts: PlacedText[] }[] {
  const [low, high] = frame.xDomain;
  const figures = axis.figures ?? 'number';
  const choices: (readonly Tick[])[] = axis.ticks
    ? thinned(axis.ticks)
    : figures === 'date'
      ? dateTickChoices(low, high)
      : [10, 8, 6, 5, 4, 3, 2, 1].map((wanted) => wordedTicks(niceTicks(low, high, wanted, figures), figures));
  const lay = (ticks: readonly Tick[]) =>
    ticks
      .filter((tick) => tick.at >= low && tick.at <= high)
      .map((tick) => ({ tick, texts: tickTexts(tick, frame, left, right) }));
  return choices.map(lay).find(clear) ?? lay(choices.at(-1)?.slice(0, 1) ?? []);
}

function thinned(ticks: readonly Tick[]): Tick[][] {
  return [1, 2, 3, 4, 5, 10, 20, 50, 100].map((every) => ticks.filter((_, i) => i % every === 0));
}

function tickTexts(tick: Tick, frame: Frame, left: number, right: number): PlacedText[] {
  const width = Math.max(...tick.lines.map((line) => textWidth(line, TEXT_SIZE, 400)));
  // Words at an end may reach this far into the margin before they are moved in.
  const margin = 11;
  const x = Math.min(Math.max(xAt(frame, tick.at), left + width / 2 - margin), right - width / 2 + margin);
  return tick.lines.map((line, row) =>
    placed(line, x, frame.bottom + 32 + row * ROW, { color: QUIET, align: 'center', role: 'x figure' }),
  );
}

function clear(labels: readonly { texts: readonly PlacedText[] }[]): boolean {
  const edges = labels.map(({ texts }) => {
    const boxes = texts.map(boxOf);
    return { left: Math.min(...boxes.map((box) => box.left)), right: Math.max(...boxes.map((box) => box.right)) };
  });
  return edges.every((edge, i) => i === 0 || edge.left - (edges[i - 1]?.right ?? 0) >= TICK_GAP);
}
