import type { Chart } from '../charts/types.ts';
import type { PictureInput } from '../verdict/types.ts';
import { EMBER, EMBER_TINT, GHOST, QUIET, SAND, SAND_EDGE, SAND_INK, TEXT_SIZE } from './palette.ts';
import { HEADROOM } from './plotFrame.ts';
import { GHOST_MARK } from './pointMarks.ts';
import { type Frame, type PlacedMark, type PlacedText, type Slab, type Stroke, xAt } from './scene.ts';
import { textWidth } from './textWidth.ts';

/** The stretch the usual level was set from: its own ground, and words in the strip kept free above the data. */
export function baselineGround(chart: Chart, frame: Frame): { slabs: Slab[]; strokes: Stroke[]; texts: PlacedText[] } {
  const { first, last, provisional } = chart.baseline;
  const x = xAt(frame, first - 0.5);
  const x2 = xAt(frame, Math.min(last, chart.points.length) + 0.5);
  const slab: Slab = { x, y: frame.top, x2, y2: frame.bottom, color: SAND };
  const y = frame.top + HEADROOM - 12;
  const base = { y, size: TEXT_SIZE, weight: 400 as const, role: 'ground' };
  const wordings = provisional
    ? ['usual level set here (provisional)', 'provisional usual level', 'provisional']
    : ['usual level set here', 'usual level', 'usual'];
  const room = x2 - x - 12;
  const words = wordings.find((one) => textWidth(one, TEXT_SIZE, 400) <= room) ?? wordings.at(-1) ?? '';
  const width = textWidth(words, TEXT_SIZE, 400);
  const left = Math.min(x + 9, frame.right - width - 4);
  const texts: PlacedText[] = [{ ...base, text: words, x: left, color: SAND_INK, align: 'left' }];
  const judged = 'judged against it';
  const from = Math.max(x2, left + width + 12) + 9;
  if (last < chart.points.length && from + textWidth(judged, TEXT_SIZE, 400) < frame.right)
    texts.push({ ...base, text: judged, x: from, color: QUIET, align: 'left' });
  // Words wider than their ground run on past its edge; the edge then begins below them.
  const edgeTop = left + width > x2 - 4 ? frame.top + HEADROOM - 4 : frame.top;
  const shore: Stroke = { x: x2, y: edgeTop, x2, y2: frame.bottom, color: SAND_EDGE, width: 1.6 };
  return { slabs: [slab], strokes: last < chart.points.length ? [shore] : [], texts };
}

/** The most likely start as a line up to its words, and the range of starts not ruled out as a tinted strip with a bar on the axis. */
export function startMark(
  input: PictureInput,
  frame: Frame,
): { slabs: Slab[]; strokes: Stroke[]; marks: PlacedMark[] } {
  const { since, outcome } = input.verdict;
  if (!since || (outcome !== 'risen' && outcome !== 'fallen')) return { slabs: [], strokes: [], marks: [] };
  const x = xAt(frame, since.point - 0.5);
  const from = xAt(frame, since.candidates[0] - 0.5);
  const to = xAt(frame, since.candidates[1] + 0.5);
  const wide = to - from >= 4;
  const mark: PlacedMark = {
    x,
    y: frame.bottom + 6,
    shape: 'triangle-up',
    area: 150,
    fill: EMBER,
    stroke: EMBER,
    strokeWidth: 0,
  };
  return {
    slabs: wide
      ? [
          {
            x: from,
            y: frame.top + HEADROOM - 2,
            x2: to,
            y2: frame.bottom,
            color: EMBER_TINT,
          },
        ]
      : [],
    strokes: [
      {
        x,
        y: frame.top + HEADROOM - 2,
        x2: x,
        y2: frame.bottom,
        color: EMBER,
        width: 2,
      },
      ...(wide
        ? [
            {
              x: from,
              y: frame.bottom,
              x2: to,
              y2: frame.bottom,
              color: EMBER,
              width: 8,
            },
          ]
        : []),
    ],
    marks: [mark],
  };
}

/** Where the points fall apart into two levels: a broken line, with a tick above it to the words; the strip of words between stays free. */
export function splitMark(input: PictureInput, frame: Frame): Stroke[] {
  if (!input.split) return [];
  const x = xAt(frame, input.split.after + 0.5);
  const line = { x, x2: x, color: QUIET, width: 2.4 };
  return [
    { ...line, y: frame.top - 12, y2: frame.top },
    { ...line, y: frame.top + HEADROOM - 4, y2: frame.bottom, dash: [7, 6] },
  ];
}

/** The withheld subgroup: an empty slot after the last point, its mark resting on the axis because it has no value yet. */
export function ghostMark(input: PictureInput, chart: Chart, frame: Frame): { strokes: Stroke[]; marks: PlacedMark[] } {
  if (!input.waiting) return { strokes: [], marks: [] };
  const x = xAt(frame, chart.points.length + 1);
  const y = frame.bottom - 11;
  return {
    strokes: [
      {
        x,
        y: y - 10,
        x2: x,
        y2: frame.top + HEADROOM,
        color: GHOST,
        width: 1.5,
        dash: [3, 5],
      },
    ],
    marks: [{ ...GHOST_MARK, x, y }],
  };
}
