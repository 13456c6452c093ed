import type { PointDates } from '../verdict/types.ts';
import { dateShort, monthNumber, monthShort, yearOf } from './figures.ts';
import { QUIET, TEXT_SIZE } from './palette.ts';
import { boxOf, type Frame, type PlacedText, type Stroke, xAt } from './scene.ts';

interface Tick {
  readonly index: number;
  readonly lines: readonly string[];
}

/** Months between labels, tried from close to wide. */
const MONTH_STEPS = [1, 2, 3, 6, 12, 24, 60];
const GAP = 14;

/**
 * Labels under the x axis: the month in which a point's first account started, the year where it changes; days where the whole
 * chart spans under three months; point numbers when there are no dates. As many as fit without touching.
 */
export function dateAxis(
  count: number,
  dates: readonly PointDates[],
  frame: Frame,
): { texts: PlacedText[]; strokes: Stroke[]; bottom: number } {
  const ticks = pickTicks(count, dates, frame);
  const top = frame.bottom + 16;
  const texts = ticks.flatMap((tick) => labels(tick, frame));
  const strokes = ticks.map((tick) => {
    const x = xAt(frame, tick.index);
    return {
      x,
      y: frame.bottom,
      x2: x,
      y2: frame.bottom + 7,
      color: QUIET,
      width: 1.5,
    };
  });
  const rows = Math.max(1, ...ticks.map((tick) => tick.lines.length));
  return { texts, strokes, bottom: top + rows * 24 };
}

function labels(tick: Tick, frame: Frame): PlacedText[] {
  return tick.lines
    .map(
      (text, row): PlacedText => ({
        text,
        x: xAt(frame, tick.index),
        y: frame.bottom + 32 + row * 23,
        size: TEXT_SIZE,
        weight: 400,
        color: QUIET,
        align: 'center',
        role: 'date',
      }),
    )
    .filter((text) => text.text !== '');
}

function pickTicks(count: number, dates: readonly PointDates[], frame: Frame): Tick[] {
  const starts = Array.from({ length: count }, (_, i) => dates[i]?.firstStart ?? null);
  if (starts.every((day) => day === null)) return numberTicks(count, frame);
  for (const step of MONTH_STEPS) {
    const ticks: Tick[] = [];
    let bucket = Number.NaN;
    let year = Number.NaN;
    for (const [i, day] of starts.entries()) {
      if (day === null || Math.floor(monthNumber(day) / step) === bucket) continue;
      bucket = Math.floor(monthNumber(day) / step);
      const newYear = yearOf(day) !== year ? String(yearOf(day)) : '';
      year = yearOf(day);
      ticks.push({
        index: i + 1,
        lines: step >= 12 ? [newYear] : [monthShort(day), newYear],
      });
    }
    if (ticks.length < 3 && count > 3) break;
    if (fits(ticks, frame)) return ticks;
    // The first label stands for a month already under way; it gives way when only it is in the way.
    const [first, second, ...rest] = ticks;
    if (first && second && rest.length >= 2) {
      const year = first.lines[1] || second.lines[1] || '';
      const without = [
        {
          index: second.index,
          lines:
            step >= 12
              ? second.lines
              : [second.lines[0] ?? '', year === second.lines[1] ? year : yearText(starts, second.index)],
        },
        ...rest,
      ];
      if (fits(without, frame)) return without;
    }
  }
  return dayTicks(starts, frame);
}

function yearText(starts: readonly (number | null)[], index: number): string {
  const day = starts[index - 1];
  return day === null || day === undefined ? '' : String(yearOf(day));
}

function dayTicks(starts: readonly (number | null)[], frame: Frame): Tick[] {
  const known = starts.flatMap((day, i) => (day === null ? [] : [{ index: i + 1, day }]));
  for (let every = 1; every <= known.length; every++) {
    const ticks = known
      .filter((_, i) => i % every === 0)
      .map(({ index, day }, i, all): Tick => {
        const [dayOfMonth, month, year] = dateShort(day).split('\u00a0');
        const before = all[i - 1];
        return {
          index,
          lines: [`${dayOfMonth}\u00a0${month}`, before && yearOf(before.day) === Number(year) ? '' : (year ?? '')],
        };
      });
    if (fits(ticks, frame)) return ticks;
  }
  return [];
}

function numberTicks(count: number, frame: Frame): Tick[] {
  for (const every of [1, 2, 5, 10, 20, 50, 100, 200, 500]) {
    const ticks: Tick[] = [];
    for (let i = 1; i <= count; i++) {
      if (i === 1) ticks.push({ index: 1, lines: ['point\u00a01'] });
      else if (i % every === 0) ticks.push({ index: i, lines: [String(i)] });
    }
    if (fits(ticks, frame)) return ticks;
    const late = ticks.filter((tick) => tick.index === 1 || tick.index >= every * 2);
    if (fits(late, frame)) return late;
  }
  return [];
}

function fits(ticks: readonly Tick[], frame: Frame): boolean {
  const boxes = ticks.map((tick) => labels(tick, frame).map(boxOf));
  const edges = boxes.map((lines) => ({
    left: Math.min(...lines.map((box) => box.left)),
    right: Math.max(...lines.map((box) => box.right)),
  }));
  return edges.every((edge, i) => i === 0 || edge.left - (edges[i - 1]?.right ?? 0) >= GAP);
}
