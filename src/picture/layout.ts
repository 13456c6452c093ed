import type { Chart } from '../charts/types.ts';
import type { PictureInput } from '../verdict/types.ts';
import { collectionScene } from './collection.ts';
import { dateAxis } from './dateAxis.ts';
import { endLabels, endLabelsWidth, placeEndLabels } from './endLabels.ts';
import { exactLimitStrokes } from './exactLimits.ts';
import { flaggedPoints } from './flaggedPoints.ts';
import { placeFlagLane, planFlagLane } from './flagLane.ts';
import { baselineGround, ghostMark, splitMark, startMark } from './grounds.ts';
import { header } from './header.ts';
import { notes } from './notes.ts';
import { EMBER, HAIRLINE, LEVEL, MARGIN, QUIET, TEXT_SIZE, WIDTH } from './palette.ts';
import { domains, PLOT_HEIGHT, tickLabels } from './plotFrame.ts';
import { pointMarks } from './pointMarks.ts';
import { type Frame, type LevelLine, type PlacedText, type Scene, type Stroke, yAt } from './scene.ts';
import { type Stretch, stretches } from './stretches.ts';
import { textWidth } from './textWidth.ts';
import { placedChart, plottedLevels, type ValueScale, valueScale } from './valueScale.ts';

/** Places everything the picture shows. Draws what it is given: no limit, level or verdict is computed here. */
export function layout(input: PictureInput): Scene {
  const { chart } = input;
  if (!chart || chart.points.length === 0) return collectionScene(input);
  const head = header(input);
  const ends = endLabels(input);
  const range = domains(input);
  const scale = valueScale(chart);
  const placed = placedChart(chart, scale);
  const tickWords = scale.of === 'rates' ? tickLabels(range.ticks) : range.ticks.map(scale.tickWords);
  const across = {
    left: MARGIN + Math.max(...tickWords.map((words) => textWidth(words, TEXT_SIZE, 400))) + 12,
    right: WIDTH - MARGIN - endLabelsWidth(ends) - 24,
    xDomain: range.x,
  };
  const flagged = stretches(input.signals);
  const marked = movedStretch(input, chart, flagged);
  const lane = planFlagLane(marked, input, across);
  const top = head.bottom + 14 + lane.height;
  const frame: Frame = {
    ...across,
    top,
    bottom: top + PLOT_HEIGHT,
    yDomain: range.y,
  };

  const axis = dateAxis(chart.points.length, input.dates, frame);
  const below = notes(
    input,
    lane.unlabelled,
    axis.bottom + 12,
    scale.of === 'rates' && (range.ticks[0] ?? 0) > 0 ? (tickWords[0] ?? '') : '',
  );
  const flags = placeFlagLane(lane, marked, frame);
  const limits = placeEndLabels(ends, chart.points.length, frame);
  const ground = baselineGround(chart, frame);
  const start = startMark(input, frame);
  const split = splitMark(input, frame);
  const ghost = ghostMark(input, chart, frame);
  const slotPx = (frame.right - frame.left) / (range.x[1] - range.x[0]);

  const yTexts = tickWords.map(
    (text, i): PlacedText => ({
      text,
      x: frame.left - 10,
      y: yAt(frame, scale.place(range.ticks[i] ?? 0)) + 7,
      size: TEXT_SIZE,
      weight: 400,
      color: QUIET,
      align: 'right',
      role: 'rate',
    }),
  );
  const gridlines = range.ticks.map((tick): Stroke => {
    const y = yAt(frame, scale.place(tick));
    return {
      x: frame.left,
      y,
      x2: frame.right,
      y2: y,
      color: HAIRLINE,
      width: 1.2,
    };
  });
  const floor: Stroke = {
    x: frame.left,
    y: frame.bottom,
    x2: frame.right,
    y2: frame.bottom,
    color: QUIET,
    width: 1.6,
  };
  return {
    widthPx: WIDTH,
    heightPx: Math.ceil(below.bottom + MARGIN - 6),
    frame,
    slabs: ground.slabs,
    veils: start.slabs,
    under: [...gridlines, ...ground.strokes],
    band: bandRows(placed),
    levels: levelLines(input, placed, scale),
    points: pointMarks(placed, flaggedPoints(input), slotPx),
    line: slotPx < 3 ? { width: 0.8, opacity: 0.42 } : { width: 1.6, opacity: 0.55 },
    over: [
      floor,
      ...exactLimitStrokes(chart, frame),
      ...ghost.strokes,
      ...axis.strokes,
      ...start.strokes,
      ...split,
      ...head.strokes,
      ...limits.strokes,
      ...flags.strokes,
      ...below.strokes,
    ],
    marks: [...ghost.marks, ...start.marks, ...below.marks],
    texts: [...head.texts, ...flags.texts, ...ground.texts, ...yTexts, ...limits.texts, ...axis.texts, ...below.texts],
  };
}

/** When churn moved, one stretch from its most likely start to the newest point stands for all the standing flags inside it. */
function movedStretch(input: PictureInput, chart: Chart, flagged: readonly Stretch[]): readonly Stretch[] {
  const { outcome, since } = input.verdict;
  if (!since || (outcome !== 'risen' && outcome !== 'fallen')) return flagged;
  const standing = flagged.filter((stretch) => stretch.state === 'standing');
  const longest = [...standing].sort((a, b) => b.to - b.from - (a.to - a.from))[0];
  const words = longest?.words ?? (outcome === 'risen' ? 'above the usual level' : 'below the usual level');
  const flags = standing.reduce((sum, stretch) => sum + stretch.flags, 0);
  const moved: Stretch = {
    from: since.point,
    to: chart.points.length,
    state: 'standing',
    words,
    said: longest?.said ?? [since.point, chart.points.length],
    flags,
  };
  return [moved, ...flagged.filter((stretch) => stretch.state !== 'standing')];
}

/** Steps half a slot to either side of each point; neighbours with equal limits share one step. */
function bandRows(chart: Chart): Scene['band'] {
  const rows: { x: number; lower: number; center: number; upper: number }[] = [];
  const { points, center } = chart;
  for (const [i, point] of points.entries()) {
    const { lower, upper } = point;
    const before = points[i - 1];
    const after = points[i + 1];
    if (!before || before.lower !== lower || before.upper !== upper)
      rows.push({ x: point.index - 0.5, lower, center, upper });
    if (!after || after.lower !== lower || after.upper !== upper)
      rows.push({ x: point.index + 0.5, lower, center, upper });
  }
  return rows;
}

function levelLines(input: PictureInput, chart: Chart, scale: ValueScale): LevelLine[] {
  const { baseline, center, points } = chart;
  const end = points.length + 0.5;
  const lines: LevelLine[] = [
    {
      x: 0.5,
      x2: Math.min(baseline.last + 0.5, end),
      value: center,
      color: LEVEL,
      width: 2.4,
      dash: [],
    },
  ];
  if (baseline.last + 0.5 < end)
    lines.push({
      x: baseline.last + 0.5,
      x2: end,
      value: center,
      color: LEVEL,
      width: 2.4,
      dash: [9, 5],
    });
  const { since, outcome } = input.verdict;
  const { before, after } = plottedLevels(input);
  if (since && (outcome === 'risen' || outcome === 'fallen')) {
    if (before !== null)
      lines.push({
        x: 0.5,
        x2: since.point - 0.5,
        value: scale.place(before),
        color: LEVEL,
        width: 4.5,
        dash: [],
      });
    if (after !== null)
      lines.push({
        x: since.point - 0.5,
        x2: end,
        value: scale.place(after),
        color: EMBER,
        width: 4.5,
        dash: [],
      });
  }
  return lines;
}
