import type { PictureInput } from '../verdict/types.ts';
import { shownExactLimits } from './exactLimits.ts';
import type { Frame } from './scene.ts';
import { placedChart, plottedLevels, type ValueScale, valueScale } from './valueScale.ts';

/** Height of the plot, and of the strip at its top that is kept free for the words about the baseline. */
export const PLOT_HEIGHT = 330;
export const HEADROOM = 36;

/**
 * The ranges shown: from zero unless that would waste half of the height, up to the highest thing drawn, headroom added.
 * @returns domains for both axes, in places of the drawing, and tick values for the y axis (fractions, accounts or days)
 */
export function domains(input: PictureInput): {
  x: [number, number];
  y: [number, number];
  ticks: number[];
} {
  const scale = valueScale(input.chart);
  const points = input.chart ? placedChart(input.chart, scale).points : [];
  const slots = Math.max(points.length + (input.waiting ? 1 : 0), 6);
  const values = points.flatMap((point) => [point.value, point.upper]);
  const lows = points.flatMap((point) => [point.value, point.lower]);
  const { before, after } = plottedLevels(input);
  if (input.chart) values.push(...shownExactLimits(input.chart));
  for (const level of [before, after]) if (level !== null) values.push(scale.place(level));
  if (scale.of === 'numbers') return numberDomains(slots, [...values, ...lows]);
  const top = values.reduce((a, b) => Math.max(a, b), 0.004);
  if (scale.of === 'gaps') return stretchedDomains(slots, top, scale);
  const low = lows.reduce((a, b) => Math.min(a, b), top);
  const aloft = low > top / 2;
  const step = niceStep((aloft ? Math.max(top - low, top / 5) : top) / 4);
  const floor = aloft ? Math.max(0, Math.floor((low - step * 0.4) / step) * step) : 0;
  const span = Math.max((top - floor) * 1.05, 0.004);
  const ticks: number[] = [];
  for (let i = 0; floor + i * step <= Math.min(1, floor + span) + 1e-12; i++) ticks.push(floor + i * step);
  const base = floor === 0 ? -span * 0.03 : floor;
  return {
    x: [0.4, slots + 0.6],
    y: [base, base + (floor + span - base) / (1 - HEADROOM / PLOT_HEIGHT)],
    ticks,
  };
}

/** Steps worth naming on a stretched axis. */
const ROUND = [
  0, 1, 2, 5, 10, 20, 50, 100, 200, 500, 1_000, 2_000, 5_000, 10_000, 20_000, 50_000, 100_000, 200_000, 500_000,
];
/** Least room between two ticks, in px. */
const TICK_ROOM = 34;

/** The ranges of a stretched scale: from zero, with round values as far apart as their words need. */
function stretchedDomains(
  slots: number,
  top: number,
  scale: ValueScale,
): { x: [number, number]; y: [number, number]; ticks: number[] } {
  const span = top * 1.05;
  const base = -span * 0.03;
  const height = PLOT_HEIGHT - HEADROOM;
  const ticks: number[] = [];
  let last = Number.NEGATIVE_INFINITY;
  for (const value of ROUND) {
    const at = (scale.place(value) / span) * height;
    if (at > height || at - last < TICK_ROOM) continue;
    ticks.push(value);
    last = at;
  }
  return { x: [0.4, slots + 0.6], y: [base, base + (span - base) / (1 - HEADROOM / PLOT_HEIGHT)], ticks };
}

/** Differences below this are none: ready values are told with four digits. */
const TINY = 1e-12;
const TOLD_DIGITS = 1e-6;

/** The ranges of numbers of any size and sign: from zero where that wastes less than half of the height. */
function numberDomains(
  slots: number,
  values: readonly number[],
): { x: [number, number]; y: [number, number]; ticks: number[] } {
  const top = values.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);
  const bottom = values.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  // Values that are all equal, as far as can be told, still need a height to be drawn in.
  const size = Math.max(Math.abs(top), Math.abs(bottom));
  const widen = top - bottom > Math.max(TINY, size * TOLD_DIGITS) ? 0 : size > TINY ? size / 4 : 1;
  const highest = top + widen;
  const lowest = bottom - widen;
  const low = lowest > 0 && lowest < highest / 2 ? 0 : lowest;
  const span = highest - low;
  const power = 10 ** Math.floor(Math.log10(span / 4));
  const step = power * ([1, 2, 2.5, 5, 10].find((one) => one * power >= (span / 4) * 0.999) ?? 10);
  const ticks: number[] = [];
  for (let i = Math.ceil(low / step - 1e-9); i * step <= highest + span * 0.05; i++)
    ticks.push(Number((i * step).toPrecision(12)));
  const base = low - span * 0.06;
  const end = highest + span * 0.05;
  return { x: [0.4, slots + 0.6], y: [base, base + (end - base) / (1 - HEADROOM / PLOT_HEIGHT)], ticks };
}

/** Words for the ticks, with as many decimals as the step needs. */
export function tickLabels(ticks: readonly number[]): string[] {
  const step = ((ticks[1] ?? 0.01) - (ticks[0] ?? 0)) * 100;
  const digits = step >= 1 && Math.abs(step - Math.round(step)) < 1e-9 ? 0 : step >= 0.1 && onTenths(step) ? 1 : 2;
  return ticks.map((tick) => `${(tick * 100).toFixed(Math.abs(tick) < 1e-12 ? 0 : digits)}\u00a0%`);
}

function onTenths(step: number): boolean {
  return Math.abs(step * 10 - Math.round(step * 10)) < 1e-9;
}

/** The smallest of 1, 2, 2.5, 5 times a power of ten that is no smaller than the wish; at most 25 %. */
function niceStep(wish: number): number {
  const power = 10 ** Math.floor(Math.log10(Math.max(wish, 0.0005)));
  const factor = [1, 2, 2.5, 5, 10].find((one) => one * power >= wish * 0.999) ?? 10;
  return Math.min(factor * power, 0.25);
}

/** Half the width of one point's slot in px, between 5 and 14: how far brackets reach past their points. */
export function reach(frame: Frame): number {
  const slot = (frame.right - frame.left) / (frame.xDomain[1] - frame.xDomain[0]);
  return Math.min(14, Math.max(5, slot / 2));
}
