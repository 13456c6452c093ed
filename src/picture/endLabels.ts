import type { PictureInput } from '../verdict/types.ts';
import { withinLimits } from '../verdict/words/testWords.ts';
import { EMBER, INK, LEVEL, TEXT_SIZE, WATER_EDGE } from './palette.ts';
import { type Frame, type PlacedText, type Stroke, xAt, yAt } from './scene.ts';
import { textWidth } from './textWidth.ts';
import { plottedLevels, valueScale } from './valueScale.ts';

interface EndLabel {
  readonly lines: readonly string[];
  readonly value: number;
  readonly color: string;
  readonly line: string;
  readonly role: string;
}

const ROW = 23;
const GAP = 9;

/** The labels at the right ends of the lines, in plain words: usual level, both limits, and the level since it moved. */
export function endLabels(input: PictureInput): EndLabel[] {
  const chart = input.chart;
  const last = chart?.points.at(-1);
  if (!chart || !last) return [];
  const labels: EndLabel[] = [];
  const spread = last.upper > last.lower;
  const within = withinLimits(chart.kind);
  const scale = valueScale(chart);
  if (spread && (last.upper < 1 || scale.of !== 'rates'))
    labels.push({
      lines: [within, 'stays below', scale.limitWords(last.upper, last.lower)],
      value: scale.place(last.upper),
      color: INK,
      line: WATER_EDGE,
      role: 'limit',
    });
  labels.push({
    lines: scale.usualWords(chart.center),
    value: scale.place(chart.center),
    color: LEVEL,
    line: LEVEL,
    role: 'center',
  });
  if (spread && (last.lower > 0 || scale.of === 'numbers'))
    labels.push({
      lines: [within, 'stays above', scale.limitWords(last.lower, last.upper)],
      value: scale.place(last.lower),
      color: INK,
      line: WATER_EDGE,
      role: 'limit',
    });
  const { outcome } = input.verdict;
  const { after } = plottedLevels(input);
  if (after !== null && (outcome === 'risen' || outcome === 'fallen'))
    labels.push({
      lines: scale.sinceWords(after),
      value: scale.place(after),
      color: EMBER,
      line: EMBER,
      role: 'after',
    });
  return labels;
}

/** Room the labels need to the right of the plot, in px. */
export function endLabelsWidth(labels: readonly EndLabel[]): number {
  return Math.max(0, ...labels.flatMap((label) => label.lines.map((line) => textWidth(line, TEXT_SIZE, 700))));
}

/**
 * Sets the labels at the height of their lines, pushed apart as little as needed so that none touches another, with a thin line
 * back to the end of what each one names.
 */
export function placeEndLabels(
  labels: readonly EndLabel[],
  points: number,
  frame: Frame,
): { texts: PlacedText[]; strokes: Stroke[] } {
  const sorted = [...labels].sort((a, b) => b.value - a.value);
  const heights = sorted.map((label) => label.lines.length * ROW);
  const tops = sorted.map((label, i) => yAt(frame, label.value) - (heights[i] ?? 0) / 2);
  // Down from the top, then back up from the bottom: two passes settle a one-dimensional stack.
  const bottomMost = frame.bottom + 14;
  for (let i = 0; i < tops.length; i++) {
    const floor = i === 0 ? frame.top - 10 : (tops[i - 1] ?? 0) + (heights[i - 1] ?? 0) + GAP;
    tops[i] = Math.max(tops[i] ?? 0, floor);
  }
  for (let i = tops.length - 1; i >= 0; i--) {
    const ceiling = (i === tops.length - 1 ? bottomMost : (tops[i + 1] ?? 0) - GAP) - (heights[i] ?? 0);
    tops[i] = Math.min(tops[i] ?? 0, ceiling);
  }
  const texts: PlacedText[] = [];
  const strokes: Stroke[] = [];
  const x = frame.right + 24;
  for (const [i, label] of sorted.entries()) {
    const top = tops[i] ?? 0;
    for (const [row, text] of label.lines.entries())
      texts.push({
        text,
        x,
        y: top + row * ROW + 17,
        size: TEXT_SIZE,
        weight: row === label.lines.length - 1 || label.role === 'after' ? 700 : 400,
        color: label.color,
        align: 'left',
        role: label.role,
      });
    const y = yAt(frame, label.value);
    const end = xAt(frame, points + 0.5) + 2;
    if (end < frame.right)
      strokes.push({
        x: end,
        y,
        x2: frame.right,
        y2: y,
        color: label.line,
        width: 1.4,
        dash: [2, 4],
      });
    strokes.push({
      x: frame.right + 1,
      y,
      x2: x - 5,
      y2: top + (heights[i] ?? 0) / 2,
      color: label.line,
      width: 1.6,
    });
  }
  return { texts, strokes };
}
